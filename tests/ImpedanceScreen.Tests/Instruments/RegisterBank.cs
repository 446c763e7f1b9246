using ImpedanceScreen.Instruments.Modbus;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>A unit with 100 items of each kind. Every peer of these tests, in whatever language, starts with the same values.</summary>
internal sealed class RegisterBank
{
    public const int Size = 100;

    public bool[] Coils { get; } = [.. Enumerable.Range(0, Size).Select(InitialCoil)];

    public bool[] Inputs { get; } = [.. Enumerable.Range(0, Size).Select(InitialInput)];

    public ushort[] Holding { get; } = [.. Enumerable.Range(0, Size).Select(InitialHolding)];

    public ushort[] InputRegisters { get; } = [.. Enumerable.Range(0, Size).Select(InitialInputRegister)];

    /// <summary>Called with each request before it is carried out.</summary>
    public Action<ModbusRequest> Seen { get; set; } = _ => { };

    /// <summary>Called after each write, as wiring that moves inputs along with coils.</summary>
    public Action Wiring { get; set; } = () => { };

    public static bool InitialCoil(int address) => address % 2 == 1;

    public static bool InitialInput(int address) => address % 3 == 0;

    public static ushort InitialHolding(int address) => (ushort)(1000 + address);

    public static ushort InitialInputRegister(int address) => (ushort)(2000 + address);

    /// <summary>Carries a request out.</summary>
    /// <returns>Length of the answer.</returns>
    public int Answer(ReadOnlySpan<byte> requestPdu, Span<byte> answerPdu)
    {
        try
        {
            var request = ModbusRequest.Read(requestPdu);
            Seen(request);
            return request.Address + request.Quantity <= Size
                ? Carry(request, answerPdu)
                : throw new ModbusRefusalException(request.Function, ModbusExceptionCode.IllegalDataAddress);
        }
        catch (ModbusRefusalException refusal)
        {
            return refusal.Write(answerPdu);
        }
    }

    private int Carry(ModbusRequest request, Span<byte> pdu)
    {
        Range range = request.Address..(request.Address + request.Quantity);
        switch (request)
        {
            case ReadBits read:
                return read.WriteAnswer((read.Function == ModbusFunction.ReadCoils ? Coils : Inputs)[range], pdu);
            case ReadRegisters read:
                bool holding = read.Function == ModbusFunction.ReadHoldingRegisters;
                return read.WriteAnswer((holding ? Holding : InputRegisters)[range], pdu);
            case WriteCoils write:
                write.Values.ToArray().CopyTo(Coils, write.Address);
                Wiring();
                return write.WriteAnswer(pdu);
            case WriteRegisters write:
                write.Values.ToArray().CopyTo(Holding, write.Address);
                return write.WriteAnswer(pdu);
            default:
                throw new InvalidOperationException($"{request.GetType().Name} is no request of this bank.");
        }
    }
}
