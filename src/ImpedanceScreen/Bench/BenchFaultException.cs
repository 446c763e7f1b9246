namespace ImpedanceScreen.Bench;

/// <summary>What the bench did not do.</summary>
public enum BenchFault
{
    /// <summary>A link to the relay fixture gives no usable answer.</summary>
    FixtureLost,

    /// <summary>The meter gives no usable answer.</summary>
    MeterLost,

    /// <summary>Another meter than the fixture file names answers.</summary>
    MeterChanged,

    /// <summary>The meter reports an error in its queue.</summary>
    MeterError,

    /// <summary>A coil does not read back as commanded.</summary>
    CoilNotConfirmed,

    /// <summary>A mirror contact contradicts its coil.</summary>
    ContactContradicted,

    /// <summary>The order breaks a switching rule (two loads on one output, load without selector).</summary>
    OrderRefused,

    /// <summary>An output holds a voltage though the board's supply is off.</summary>
    NotDischarged,
}

/// <summary>The bench did not do as told. The bench is to be made safe, the attempt aborted.</summary>
public sealed class BenchFaultException : Exception
{
    /// <summary>Makes the exception.</summary>
    /// <param name="fault">What failed.</param>
    /// <param name="message">What happened and what to look at, for a person.</param>
    /// <param name="inner">What caused it.</param>
    public BenchFaultException(BenchFault fault, string message, Exception? inner = null)
        : base(message, inner) => Fault = fault;

    /// <summary>What failed.</summary>
    public BenchFault Fault { get; }
}
