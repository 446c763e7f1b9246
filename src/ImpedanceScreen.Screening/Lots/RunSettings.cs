namespace ImpedanceScreen.Screening.Lots;

/// <summary>How this process runs.</summary>
/// <param name="ProgramVersion">Version of the program.</param>
/// <param name="TimeScale">Factor on settle, warm-up and contact times: 1 on a real bench.</param>
/// <param name="Time">Clock.</param>
/// <param name="Arithmetic">Where results are computed, so that the bench does not wait: the thread pool on a
/// station.</param>
public sealed record RunSettings(string ProgramVersion, double TimeScale, TimeProvider Time, TaskScheduler Arithmetic);
