using System.Buffers.Binary;

namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>
/// A request, MODBUS Application Protocol Specification V1.1b3 section 6. A client writes it and reads the answer by
/// it, so that the answer
/// is checked against what was asked; a server reads it and writes the answer by it.
/// </summary>
public abstract record ModbusRequest
{
    private protected ModbusRequest(ModbusFunction function, ushort address, int quantity)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(quantity, 1);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(quantity, QuantityMax(function));
        ArgumentOutOfRangeException.ThrowIfGreaterThan(quantity, ModbusLimits.Addresses - address);
        Function = function;
        Address = address;
        Quantity = (ushort)quantity;
    }

    /// <summary>What to do.</summary>
    public ModbusFunction Function { get; }

    /// <summary>Address of the first item, as on the wire.</summary>
    public ushort Address { get; }

    /// <summary>How many items.</summary>
    public ushort Quantity { get; }

    /// <summary>Length of the protocol data unit of the answer where it is no refusal, bytes.</summary>
    public abstract int AnswerLength { get; }

    /// <summary>Writes the request's protocol data unit.</summary>
    /// <param name="pdu">Where to; <see cref="ModbusLimits.PduLength"/> bytes suffice.</param>
    /// <returns>Its length.</returns>
    public abstract int Write(Span<byte> pdu);

    /// <summary>Reads a request as a server.</summary>
    /// <exception cref="ModbusRefusalException">The request is to be answered with this.</exception>
    public static ModbusRequest Read(ReadOnlySpan<byte> pdu)
    {
        var function = pdu.IsEmpty ? ModbusFunction.None : (ModbusFunction)pdu[0];
        if (!Enum.IsDefined(function) || function == ModbusFunction.None)
        {
            throw new ModbusRefusalException(function, ModbusExceptionCode.IllegalFunction);
        }

        if (pdu.Length < 5)
        {
            throw new ModbusRefusalException(function, ModbusExceptionCode.IllegalDataValue);
        }

        ushort address = BinaryPrimitives.ReadUInt16BigEndian(pdu[1..]);
        ushort word = BinaryPrimitives.ReadUInt16BigEndian(pdu[3..]);
        ReadOnlySpan<byte> rest = pdu[5..];
        ThrowIfRefused(function, address, word, rest);
        return function switch
        {
            ModbusFunction.ReadCoils or ModbusFunction.ReadDiscreteInputs => new ReadBits(function, address, word),
            ModbusFunction.WriteSingleCoil => new WriteSingleCoil(address, word == WriteSingleCoil.On),
            ModbusFunction.WriteSingleRegister => new WriteSingleRegister(address, word),
            ModbusFunction.WriteMultipleCoils => WriteMultipleCoils.Read(address, word, rest[1..]),
            ModbusFunction.WriteMultipleRegisters => WriteMultipleRegisters.Read(address, rest[1..]),
            _ => new ReadRegisters(function, address, word),
        };
    }

    /// <summary>Checks that an answer is to this request, of its function and length.</summary>
    private protected void CheckAnswer(ReadOnlySpan<byte> pdu)
    {
        if (pdu.IsEmpty)
        {
            throw new ModbusException(ModbusFault.WrongLength, "The answer is empty.");
        }

        if (pdu[0] == ((byte)Function | ModbusRefusalException.Flag))
        {
            throw pdu.Length == ModbusRefusalException.PduLength
                ? new ModbusRefusalException(Function, (ModbusExceptionCode)pdu[1])
                : WrongLength(pdu.Length, ModbusRefusalException.PduLength);
        }

        if (pdu[0] != (byte)Function)
        {
            throw new ModbusException(
                ModbusFault.WrongFunction, $"The answer is to function {pdu[0]}, asked was {Function:D}.");
        }

        if (pdu.Length != AnswerLength)
        {
            throw WrongLength(pdu.Length, AnswerLength);
        }
    }

    /// <summary>Checks the same for an answer that states how many bytes follow.</summary>
    private protected void CheckCountedAnswer(ReadOnlySpan<byte> pdu)
    {
        CheckAnswer(pdu);
        if (pdu[1] != AnswerLength - 2)
        {
            throw new ModbusException(
                ModbusFault.WrongLength, $"The answer states {pdu[1]} bytes where {AnswerLength - 2} are due.");
        }
    }

    private protected void WriteCount(int quantity, Span<byte> pdu)
    {
        if (quantity != Quantity)
        {
            throw new ArgumentException($"{quantity} items answer a request for {Quantity}.", nameof(quantity));
        }

        pdu[0] = (byte)Function;
        pdu[1] = (byte)(AnswerLength - 2);
    }

    private protected int WriteHead(Span<byte> pdu, ushort word)
    {
        pdu[0] = (byte)Function;
        BinaryPrimitives.WriteUInt16BigEndian(pdu[1..], Address);
        BinaryPrimitives.WriteUInt16BigEndian(pdu[3..], word);
        return 5;
    }

    private static int QuantityMax(ModbusFunction function) => function switch
    {
        ModbusFunction.ReadCoils or ModbusFunction.ReadDiscreteInputs => ModbusLimits.ReadBits,
        ModbusFunction.ReadHoldingRegisters or ModbusFunction.ReadInputRegisters => ModbusLimits.ReadRegisters,
        ModbusFunction.WriteMultipleCoils => ModbusLimits.WriteCoils,
        ModbusFunction.WriteMultipleRegisters => ModbusLimits.WriteRegisters,
        _ => 1,
    };

    private static void ThrowIfRefused(ModbusFunction function, ushort address, ushort word, ReadOnlySpan<byte> rest)
    {
        bool single = function is ModbusFunction.WriteSingleCoil or ModbusFunction.WriteSingleRegister;
        int quantity = single ? 1 : word;
        bool wellFormed = function switch
        {
            ModbusFunction.WriteSingleCoil => rest.IsEmpty && word is (WriteSingleCoil.On or WriteSingleCoil.Off),
            ModbusFunction.WriteMultipleCoils => Holds(rest, PackedBits.Length(quantity)),
            ModbusFunction.WriteMultipleRegisters => Holds(rest, 2 * quantity),
            _ => rest.IsEmpty,
        };
        if (!wellFormed || quantity < 1 || quantity > QuantityMax(function))
        {
            throw new ModbusRefusalException(function, ModbusExceptionCode.IllegalDataValue);
        }

        if (address + quantity > ModbusLimits.Addresses)
        {
            throw new ModbusRefusalException(function, ModbusExceptionCode.IllegalDataAddress);
        }
    }

    // A byte count, then as many bytes.
    private static bool Holds(ReadOnlySpan<byte> rest, int length) =>
        rest.Length == 1 + length && rest[0] == length;

    private static ModbusException WrongLength(int length, int expected) => new(
        ModbusFault.WrongLength, $"The answer has {length} bytes where {expected} are due.");
}
