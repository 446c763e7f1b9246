namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>Why an exchange gave no answer.</summary>
public enum ModbusFault
{
    /// <summary>The unit refused the request by an exception reply.</summary>
    Refused,

    /// <summary>The answer comes from another unit.</summary>
    WrongUnit,

    /// <summary>The answer is to another function.</summary>
    WrongFunction,

    /// <summary>The answer is longer or shorter than the request asks for.</summary>
    WrongLength,

    /// <summary>The checksum of the frame is wrong.</summary>
    WrongChecksum,

    /// <summary>The header is no Modbus header, or its transaction was never sent.</summary>
    WrongTransaction,

    /// <summary>The answer to a write repeats another address, value or quantity than was written.</summary>
    WrongEcho,

    /// <summary>The line returned other bytes than were sent: another sender, or no echoing adapter.</summary>
    Collision,

    /// <summary>No complete answer in the allowed time.</summary>
    Timeout,

    /// <summary>The link could not be opened or the far end is gone.</summary>
    LinkLost,
}

/// <summary>A Modbus exchange failed.</summary>
public class ModbusException : Exception
{
    /// <summary>Makes the exception.</summary>
    /// <param name="fault">What was wrong.</param>
    /// <param name="message">The same for a person.</param>
    /// <param name="inner">What caused it.</param>
    public ModbusException(ModbusFault fault, string message, Exception? inner = null)
        : base(message, inner) => Fault = fault;

    /// <summary>What was wrong.</summary>
    public ModbusFault Fault { get; }
}
