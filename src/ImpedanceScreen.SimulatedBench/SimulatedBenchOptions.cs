using ImpedanceScreen.Jobs;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.SimulatedBench;

/// <summary>What a simulated bench is to be.</summary>
/// <param name="Job">Limit and fixture file, bound to one another.</param>
/// <param name="Population">The boards.</param>
/// <param name="Seed">Everything random follows from it.</param>
public sealed record SimulatedBenchOptions(ScreeningJob Job, Population Population, ulong Seed)
{
    /// <summary>Factor on settling, integration and physics, more than 0 and at most 1; 1 is real time.</summary>
    public double TimeScale { get; init; } = 1.0;

    /// <summary>How many boards are presented; null for no end.</summary>
    public long? Boards { get; init; }

    /// <summary>Serial number of the first board; its trailing digits count on.</summary>
    public string FirstSerial { get; init; } = "BOARD-000001";

    /// <summary>Where the truth about each board goes; null for nowhere.</summary>
    public TextWriter? Truth { get; init; }

    /// <summary>Where the log goes; null for nowhere.</summary>
    public TextWriter? Log { get; init; }

    /// <summary>Clock.</summary>
    public TimeProvider Time { get; init; } = TimeProvider.System;

    /// <summary>Whether and where it listens besides its in-memory channels.</summary>
    public Listening Listening { get; init; } = Listening.Nowhere;

    /// <summary>The far end of each serial link, by the link's name; used where it listens.</summary>
    public IReadOnlyDictionary<string, string> SerialDevices { get; init; } = new Dictionary<string, string>();
}

/// <summary>Where a simulated bench listens.</summary>
public enum Listening
{
    /// <summary>In memory only.</summary>
    Nowhere,

    /// <summary>On the loopback addresses that the fixture file states, and on serial devices.</summary>
    AsDeclared,

    /// <summary>On free loopback ports, and on serial devices.</summary>
    OnFreePorts,
}
