using ImpedanceScreen.Estimation;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;

namespace ImpedanceScreen.Planning;

/// <summary>
/// The fixed loading plan of one output in one drive state: the return rail where there is one, unloaded, every load in
/// the order of ascending current, unloaded again. Pure: what it wants follows from what was read.
/// </summary>
public static class FixedPlan
{
    /// <summary>What is next.</summary>
    /// <param name="job">The output and state.</param>
    /// <param name="soFar">What this plan asked for and got, in order.</param>
    /// <param name="testsPerBoard">Diagnostic tests on the board (<see cref="DiagnosticAlarm.TestsOf"/>).</param>
    public static PlanStep Next(StateJob job, IReadOnlyList<LoadPointReadings> soFar, int testsPerBoard)
    {
        ArgumentNullException.ThrowIfNull(job);
        ArgumentNullException.ThrowIfNull(soFar);
        var set = new ReadingSet(job, soFar);
        if (!set.IsNumeric)
        {
            return new PlanStep.Stop(StopReason.NoReading);
        }

        if (soFar.Any(read => read.ContactProved == false))
        {
            return new PlanStep.Stop(StopReason.ContactContradicted);
        }

        if (job.LoadReturn is not null && set.Rail.Length == 0)
        {
            return Measure(job, new LoadPoint(null, Sensed.LoadReturn));
        }

        if (!set.IsRailAsStated)
        {
            return new PlanStep.Stop(StopReason.ReturnNotAsStated);
        }

        if (set.Unloaded.Length == 0)
        {
            return Measure(job, new LoadPoint(null));
        }

        return job.State.UnloadedWindowVolt.Contains(ReadingSet.Mean(set.Unloaded[0]).Volt)
            ? NextLoad(set, testsPerBoard)
            : new PlanStep.Stop(StopReason.UnloadedOutsideWindow);
    }

    private static PlanStep NextLoad(ReadingSet set, int testsPerBoard)
    {
        bool limits = LimitingTest.Find(set, DiagnosticAlarm.RatePerTest(testsPerBoard)) is not null;
        if (set.ReadUnloadedAgain || set.Job.Loads.Count == 0)
        {
            return new PlanStep.Stop(limits ? StopReason.Limiting : StopReason.PlanComplete);
        }

        Load? next = set.Job.Loads.FirstOrDefault(load => !Array.Exists(set.Loaded, read => read.Point.Load == load));

        // At the first sign of limiting no heavier load is tried, but the output has still to come back.
        return Measure(set.Job, new LoadPoint(limits ? null : next));
    }

    private static PlanStep.Measure Measure(StateJob job, LoadPoint point) =>
        new(point, job.State.ReadingsPerLoadPoint);
}
