using System.Collections;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Modbus;

namespace ImpedanceScreen.SimulatedBench.Relays;

/// <summary>
/// One relay unit: its coils, inputs and registers, and what it answers to requests. It has as many coils and inputs
/// as the fixture file's highest address needs, in groups of eight as such devices are built.
/// </summary>
/// <remarks>One caller at a time.</remarks>
internal sealed class SimulatedUnit
{
    private const int Group = 8;
    private const int HoldingRegisters = 16;

    private readonly RelayUnit unit;
    private readonly BitArray coils;
    private readonly ushort[] holding = new ushort[HoldingRegisters];
    private readonly int inputCount;
    private readonly int inputRegisterCount;

    /// <param name="unit">The unit as declared.</param>
    /// <param name="addresses">Highest addresses that the fixture file uses.</param>
    public SimulatedUnit(RelayUnit unit, UnitAddresses addresses)
    {
        this.unit = unit;
        coils = new BitArray(WholeGroups(addresses.Coils));
        inputCount = WholeGroups(addresses.Inputs);
        inputRegisterCount = addresses.InputRegisters;
    }

    public RelayUnit Unit => unit;

    /// <summary>Reads an input when it is asked for.</summary>
    public required Func<ushort, bool> ReadInput { get; init; }

    /// <summary>Reads an input register when it is asked for.</summary>
    public required Func<ushort, ushort> ReadInputRegister { get; init; }

    /// <summary>Told of every coil that changes, after it has changed.</summary>
    public required Action<ushort, bool, string> CoilChanged { get; init; }

    public bool IsOn(ushort coil) => coils[coil];

    /// <summary>Carries a request out and writes its answer.</summary>
    /// <returns>Length of the answer.</returns>
    /// <exception cref="ModbusRefusalException">The request is to be refused.</exception>
    public int Answer(ReadOnlySpan<byte> request, Span<byte> answer)
    {
        var asked = ModbusRequest.Read(request);
        int end = asked.Address + asked.Quantity;
        switch (asked)
        {
            case ReadBits { Function: ModbusFunction.ReadCoils } read:
                RefuseBeyond(asked, end, coils.Length);
                return read.WriteAnswer([.. Addresses(asked).Select(address => coils[address])], answer);
            case ReadBits read:
                RefuseBeyond(asked, end, inputCount);
                return read.WriteAnswer([.. Addresses(asked).Select(ReadInput)], answer);
            case ReadRegisters { Function: ModbusFunction.ReadHoldingRegisters } read:
                RefuseBeyond(asked, end, holding.Length);
                return read.WriteAnswer([.. Addresses(asked).Select(address => holding[address])], answer);
            case ReadRegisters read:
                RefuseBeyond(asked, end, inputRegisterCount);
                return read.WriteAnswer([.. Addresses(asked).Select(ReadInputRegister)], answer);
            case WriteCoils write:
                RefuseBeyond(asked, end, coils.Length);
                SetCoils(write);
                return write.WriteAnswer(answer);
            case WriteRegisters write:
                RefuseBeyond(asked, end, holding.Length);
                write.Values.ToArray().CopyTo(holding, asked.Address);
                return write.WriteAnswer(answer);
            default:
                throw new ModbusRefusalException(asked.Function, ModbusExceptionCode.IllegalFunction);
        }
    }

    /// <summary>Drops every coil, as the communication watchdog does.</summary>
    public void DropAll()
    {
        for (int i = 0; i < coils.Length; i++)
        {
            Set((ushort)i, false, "watchdog");
        }
    }

    private void SetCoils(WriteCoils write)
    {
        for (int i = 0; i < write.Values.Count; i++)
        {
            Set((ushort)(write.Address + i), write.Values[i], "command");
        }
    }

    private void Set(ushort coil, bool on, string cause)
    {
        if (coils[coil] != on)
        {
            coils[coil] = on;
            CoilChanged(coil, on, cause);
        }
    }

    private static IEnumerable<ushort> Addresses(ModbusRequest asked) =>
        Enumerable.Range(asked.Address, asked.Quantity).Select(address => (ushort)address);

    private static void RefuseBeyond(ModbusRequest asked, int end, int count)
    {
        if (end > count)
        {
            throw new ModbusRefusalException(asked.Function, ModbusExceptionCode.IllegalDataAddress);
        }
    }

    private static int WholeGroups(int count) => (count + Group - 1) / Group * Group;
}
