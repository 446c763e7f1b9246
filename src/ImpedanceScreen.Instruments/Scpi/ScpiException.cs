namespace ImpedanceScreen.Instruments.Scpi;

/// <summary>Why an instrument's answer is of no use.</summary>
public enum ScpiFault
{
    /// <summary>No complete answer in the allowed time.</summary>
    Timeout,

    /// <summary>The link could not be opened or the far end is gone.</summary>
    LinkLost,

    /// <summary>An answer does not end within the longest line.</summary>
    LineTooLong,

    /// <summary>The answer is no number (IEEE 488.2 NR1, NR2, NR3).</summary>
    NotNumeric,

    /// <summary>The answer is no entry of an error queue.</summary>
    NotAnErrorEntry,

    /// <summary>The instrument reports errors in its queue.</summary>
    ErrorReported,

    /// <summary>Another instrument answers than was declared.</summary>
    WrongIdentity,
}

/// <summary>An exchange with a SCPI instrument failed.</summary>
public sealed class ScpiException : Exception
{
    /// <summary>Makes the exception.</summary>
    /// <param name="fault">What was wrong.</param>
    /// <param name="message">The same for a person.</param>
    /// <param name="inner">What caused it.</param>
    public ScpiException(ScpiFault fault, string message, Exception? inner = null)
        : base(message, inner) => Fault = fault;

    /// <summary>What was wrong.</summary>
    public ScpiFault Fault { get; }
}
