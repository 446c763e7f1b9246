namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>
/// A write. Its answer repeats address and value (functions 05, 06) or address and quantity (15, 16).
/// </summary>
public abstract record ModbusWriteRequest : ModbusRequest
{
    private protected ModbusWriteRequest(ModbusFunction function, ushort address, int quantity)
        : base(function, address, quantity)
    {
    }

    /// <inheritdoc/>
    public sealed override int AnswerLength => 5;

    private protected abstract ushort Echo { get; }

    /// <summary>Checks the answer as a client.</summary>
    /// <exception cref="ModbusException">The answer is a refusal or not to this request.</exception>
    public void ReadAnswer(ReadOnlySpan<byte> pdu)
    {
        CheckAnswer(pdu);
        Span<byte> due = stackalloc byte[5];
        WriteAnswer(due);
        if (!pdu.SequenceEqual(due))
        {
            throw new ModbusException(
                ModbusFault.WrongEcho,
                $"The answer repeats {Convert.ToHexString(pdu[1..])} where {Convert.ToHexString(due[1..])} is due.");
        }
    }

    /// <summary>Writes the answer as a server.</summary>
    /// <param name="pdu">Where to.</param>
    /// <returns>Its length.</returns>
    public int WriteAnswer(Span<byte> pdu) => WriteHead(pdu, Echo);
}

/// <summary>A write to coils.</summary>
public abstract record WriteCoils : ModbusWriteRequest
{
    private protected WriteCoils(ModbusFunction function, ushort address, IReadOnlyList<bool> values)
        : base(function, address, values.Count) => Values = values;

    /// <summary>The coils' new values from <see cref="ModbusRequest.Address"/> on.</summary>
    public IReadOnlyList<bool> Values { get; }
}

/// <summary>Writes one coil (function 05).</summary>
public sealed record WriteSingleCoil : WriteCoils
{
    internal const ushort On = 0xFF00;
    internal const ushort Off = 0x0000;

    /// <summary>Makes the request.</summary>
    public WriteSingleCoil(ushort address, bool value)
        : base(ModbusFunction.WriteSingleCoil, address, [value])
    {
    }

    private protected override ushort Echo => Values[0] ? On : Off;

    /// <inheritdoc/>
    public override int Write(Span<byte> pdu) => WriteHead(pdu, Echo);
}

/// <summary>Writes neighbouring coils (function 15).</summary>
public sealed record WriteMultipleCoils : WriteCoils
{
    /// <summary>Makes the request.</summary>
    /// <param name="address">First coil.</param>
    /// <param name="values">Their values, 1 to 1968.</param>
    public WriteMultipleCoils(ushort address, IReadOnlyList<bool> values)
        : base(ModbusFunction.WriteMultipleCoils, address, values)
    {
    }

    private protected override ushort Echo => Quantity;

    /// <inheritdoc/>
    public override int Write(Span<byte> pdu)
    {
        int head = WriteHead(pdu, Quantity);
        int count = PackedBits.Length(Quantity);
        pdu[head] = (byte)count;
        PackedBits.Write(Values, pdu[(head + 1)..]);
        return head + 1 + count;
    }

    internal static WriteMultipleCoils Read(ushort address, int quantity, ReadOnlySpan<byte> packed) =>
        new(address, PackedBits.Read(packed, quantity));
}

/// <summary>A write to holding registers.</summary>
public abstract record WriteRegisters : ModbusWriteRequest
{
    private protected WriteRegisters(ModbusFunction function, ushort address, IReadOnlyList<ushort> values)
        : base(function, address, values.Count) => Values = values;

    /// <summary>The registers' new values from <see cref="ModbusRequest.Address"/> on.</summary>
    public IReadOnlyList<ushort> Values { get; }
}

/// <summary>Writes one register (function 06).</summary>
public sealed record WriteSingleRegister : WriteRegisters
{
    /// <summary>Makes the request.</summary>
    public WriteSingleRegister(ushort address, ushort value)
        : base(ModbusFunction.WriteSingleRegister, address, [value])
    {
    }

    private protected override ushort Echo => Values[0];

    /// <inheritdoc/>
    public override int Write(Span<byte> pdu) => WriteHead(pdu, Echo);
}

/// <summary>Writes neighbouring registers (function 16).</summary>
public sealed record WriteMultipleRegisters : WriteRegisters
{
    /// <summary>Makes the request.</summary>
    /// <param name="address">First register.</param>
    /// <param name="values">Their values, 1 to 123.</param>
    public WriteMultipleRegisters(ushort address, IReadOnlyList<ushort> values)
        : base(ModbusFunction.WriteMultipleRegisters, address, values)
    {
    }

    private protected override ushort Echo => Quantity;

    /// <inheritdoc/>
    public override int Write(Span<byte> pdu)
    {
        int head = WriteHead(pdu, Quantity);
        pdu[head] = (byte)(2 * Quantity);
        PackedRegisters.Write(Values, pdu[(head + 1)..]);
        return head + 1 + (2 * Quantity);
    }

    internal static WriteMultipleRegisters Read(ushort address, ReadOnlySpan<byte> packed) =>
        new(address, PackedRegisters.Read(packed));
}
