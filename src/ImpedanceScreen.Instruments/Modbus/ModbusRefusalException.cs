namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>
/// A request was refused. A client gets it from an exception reply; a server throws it and sends what <see
/// cref="Write"/> makes of it.
/// </summary>
public sealed class ModbusRefusalException : ModbusException
{
    internal const int PduLength = 2;
    internal const byte Flag = 0x80;

    /// <summary>Makes the exception.</summary>
    /// <param name="function">The function of the request.</param>
    /// <param name="code">Why it was refused.</param>
    public ModbusRefusalException(ModbusFunction function, ModbusExceptionCode code)
        : base(ModbusFault.Refused, $"Function {function:D} was refused: exception {code:D} ({code}).")
    {
        Function = function;
        Code = code;
    }

    /// <summary>The function of the request.</summary>
    public ModbusFunction Function { get; }

    /// <summary>Why it was refused.</summary>
    public ModbusExceptionCode Code { get; }

    /// <summary>Writes the exception reply.</summary>
    /// <returns>Its length.</returns>
    public int Write(Span<byte> pdu)
    {
        pdu[0] = (byte)((byte)Function | Flag);
        pdu[1] = (byte)Code;
        return PduLength;
    }
}
