namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>Reads coils (function 01) or discrete inputs (02).</summary>
public sealed record ReadBits : ModbusRequest
{
    /// <summary>Makes the request.</summary>
    /// <param name="function">01 or 02.</param>
    /// <param name="address">First coil or input.</param>
    /// <param name="quantity">How many, 1 to 2000.</param>
    public ReadBits(ModbusFunction function, ushort address, int quantity)
        : base(function, address, quantity)
    {
        if (function is not (ModbusFunction.ReadCoils or ModbusFunction.ReadDiscreteInputs))
        {
            throw new ArgumentOutOfRangeException(nameof(function), function, "Not a function that reads bits.");
        }
    }

    /// <inheritdoc/>
    public override int AnswerLength => 2 + PackedBits.Length(Quantity);

    /// <inheritdoc/>
    public override int Write(Span<byte> pdu) => WriteHead(pdu, Quantity);

    /// <summary>Reads the answer as a client.</summary>
    /// <exception cref="ModbusException">The answer is a refusal or not to this request.</exception>
    public bool[] ReadAnswer(ReadOnlySpan<byte> pdu)
    {
        CheckCountedAnswer(pdu);
        return PackedBits.Read(pdu[2..], Quantity);
    }

    /// <summary>Writes the answer as a server.</summary>
    /// <param name="bits">As many bits as asked for.</param>
    /// <param name="pdu">Where to.</param>
    /// <returns>Its length.</returns>
    public int WriteAnswer(IReadOnlyList<bool> bits, Span<byte> pdu)
    {
        ArgumentNullException.ThrowIfNull(bits);
        WriteCount(bits.Count, pdu);
        PackedBits.Write(bits, pdu[2..]);
        return AnswerLength;
    }
}

/// <summary>Reads holding registers (function 03) or input registers (04).</summary>
public sealed record ReadRegisters : ModbusRequest
{
    /// <summary>Makes the request.</summary>
    /// <param name="function">03 or 04.</param>
    /// <param name="address">First register.</param>
    /// <param name="quantity">How many, 1 to 125.</param>
    public ReadRegisters(ModbusFunction function, ushort address, int quantity)
        : base(function, address, quantity)
    {
        if (function is not (ModbusFunction.ReadHoldingRegisters or ModbusFunction.ReadInputRegisters))
        {
            throw new ArgumentOutOfRangeException(nameof(function), function, "Not a function that reads registers.");
        }
    }

    /// <inheritdoc/>
    public override int AnswerLength => 2 + (2 * Quantity);

    /// <inheritdoc/>
    public override int Write(Span<byte> pdu) => WriteHead(pdu, Quantity);

    /// <summary>Reads the answer as a client.</summary>
    /// <exception cref="ModbusException">The answer is a refusal or not to this request.</exception>
    public ushort[] ReadAnswer(ReadOnlySpan<byte> pdu)
    {
        CheckCountedAnswer(pdu);
        return PackedRegisters.Read(pdu[2..]);
    }

    /// <summary>Writes the answer as a server.</summary>
    /// <param name="registers">As many registers as asked for.</param>
    /// <param name="pdu">Where to.</param>
    /// <returns>Its length.</returns>
    public int WriteAnswer(IReadOnlyList<ushort> registers, Span<byte> pdu)
    {
        ArgumentNullException.ThrowIfNull(registers);
        WriteCount(registers.Count, pdu);
        PackedRegisters.Write(registers, pdu[2..]);
        return AnswerLength;
    }
}
