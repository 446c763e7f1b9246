using ImpedanceScreen.Jobs;

namespace ImpedanceScreen.Estimation;

/// <summary>How the stated false-alarm rate of a board is split over its diagnostic tests.</summary>
public static class DiagnosticAlarm
{
    /// <summary>Share of good boards on which any diagnostic test may raise an alarm: 0.1 %.</summary>
    public const double BoardRate = 0.001;

    /// <summary>Tests in each drive state: scatter, limiting, recovery, lack of fit.</summary>
    public const int TestsPerState = 4;

    /// <summary>Number of diagnostic tests on a board.</summary>
    public static int TestsOf(ScreeningJob job)
    {
        ArgumentNullException.ThrowIfNull(job);
        return TestsPerState * job.States.Count;
    }

    /// <summary>Rate of one test where a board has so many (Bonferroni: the sum of the rates is the board's).</summary>
    /// <exception cref="ArgumentOutOfRangeException">Less than one test.</exception>
    public static double RatePerTest(int testsPerBoard)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(testsPerBoard, 1);
        return BoardRate / testsPerBoard;
    }
}
