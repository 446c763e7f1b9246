namespace ImpedanceScreen.Screening.Attempts;

/// <summary>What stays the same over all attempts of a process.</summary>
/// <param name="Station">Station name.</param>
/// <param name="ProgramVersion">Version of the program.</param>
/// <param name="Meters">Identity of each meter by its name in the fixture file.</param>
/// <param name="TimeScale">Factor on settle, warm-up and contact times: 1 on a real bench, smaller on a simulated
/// one.</param>
/// <param name="Time">Clock.</param>
/// <param name="Arithmetic">Where results are computed.</param>
public sealed record BenchSettings(
    string Station,
    string ProgramVersion,
    IReadOnlyDictionary<string, string> Meters,
    double TimeScale,
    TimeProvider Time,
    TaskScheduler Arithmetic);
