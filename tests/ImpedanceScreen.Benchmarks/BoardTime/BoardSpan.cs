namespace ImpedanceScreen.Benchmarks.BoardTime;

/// <summary>Where the time of one board went, as the bench saw it.</summary>
/// <param name="Board">From busy on to done on.</param>
/// <param name="Waits">Declared contact times, settling, warm-up.</param>
/// <param name="Readings">Integration and turnaround as logged.</param>
/// <param name="Line">Bytes on serial lines as logged.</param>
/// <param name="SenseSwitching">Contact time of each sense relay that closed.</param>
internal sealed record BoardSpan(TimeSpan Board, TimeSpan Waits, TimeSpan Readings, TimeSpan Line, TimeSpan SenseSwitching)
{
    /// <summary>Ratio to the floor of the sequential schedule.</summary>
    public double OverFloor => Board / (Waits + Readings + Line);

    /// <summary>Ratio to what the meter alone needs.</summary>
    public double OverReadings => Board / (Readings + Line + SenseSwitching);
}
