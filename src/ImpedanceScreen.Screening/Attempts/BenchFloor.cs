using ImpedanceScreen.Jobs;
using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Screening.Attempts;

/// <summary>
/// The least time a bench needs for the load points of a record on the sequential schedule: declared waits and the
/// meter's work, nothing else.
/// </summary>
public static class BenchFloor
{
    /// <summary>
    /// Declared contact times and settling of every load point, warm-up, and contact times of the proof of discharge.
    /// </summary>
    /// <param name="record">What was read.</param>
    /// <param name="job">What was declared.</param>
    /// <param name="timeScale">Factor on declared waits.</param>
    public static TimeSpan Waits(BoardRecord record, ScreeningJob job, double timeScale)
    {
        ArgumentNullException.ThrowIfNull(record);
        ArgumentNullException.ThrowIfNull(job);
        TimeSpan contact = Contact(job);
        TimeSpan waits = TimeSpan.Zero;
        foreach (StateResult result in record.States)
        {
            waits += result.Points.Count * (contact + JobOf(result, job).State.Settle);
        }

        return (job.Fixture.BoardSupply is { } supply
            ? waits + supply.WarmUp + (Outputs(job).Count() * contact)
            : waits) * timeScale;
    }

    /// <summary>Declared integration time of every reading, those that prove the discharge included.</summary>
    /// <param name="record">What was read.</param>
    /// <param name="job">What was declared.</param>
    /// <param name="timeScale">Factor on integration times.</param>
    public static TimeSpan Integration(BoardRecord record, ScreeningJob job, double timeScale)
    {
        ArgumentNullException.ThrowIfNull(record);
        ArgumentNullException.ThrowIfNull(job);
        IEnumerable<TimeSpan> points = record.States.Select(result =>
            result.Points.Sum(point => point.Readings.Count) * JobOf(result, job).Meter.Integration);
        IEnumerable<TimeSpan> discharge = job.Fixture.BoardSupply is null
            ? []
            : Outputs(job).Select(state => state.Meter.Integration);
        return points.Concat(discharge).Aggregate(TimeSpan.Zero, (sum, each) => sum + each) * timeScale;
    }

    /// <summary>The longest operate or release time of any relay.</summary>
    public static TimeSpan Contact(ScreeningJob job)
    {
        ArgumentNullException.ThrowIfNull(job);
        return job.Fixture.RelayUnits.Max(unit => unit.Operate > unit.Release ? unit.Operate : unit.Release);
    }

    private static IEnumerable<StateJob> Outputs(ScreeningJob job) => job.States.DistinctBy(state => state.Output.Name);

    private static StateJob JobOf(StateResult result, ScreeningJob job) =>
        job.States.Single(each => each.Output.Name == result.Output && each.State.Name == result.State);
}
