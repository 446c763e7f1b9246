using ImpedanceScreen.Jobs;
using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Screening.Attempts;

/// <summary>
/// The least time a bench needs for the load points of a record on the sequential schedule: declared waits and the
/// meter's work, nothing else.
/// </summary>
public static class BenchFloor
{
    /// <summary>Adds the floor of every load point, the warm-up and the proof of discharge.</summary>
    /// <param name="record">What was read.</param>
    /// <param name="job">What was declared.</param>
    /// <param name="timeScale">Factor on declared waits and integration.</param>
    /// <param name="turnaround">What a reading takes at the meter beyond its integration; not scaled.</param>
    public static TimeSpan Of(BoardRecord record, ScreeningJob job, double timeScale, TimeSpan turnaround)
    {
        ArgumentNullException.ThrowIfNull(record);
        ArgumentNullException.ThrowIfNull(job);
        TimeSpan contact = job.Fixture.RelayUnits.Max(unit => unit.Operate > unit.Release ? unit.Operate : unit.Release);
        TimeSpan scaled = TimeSpan.Zero;
        int readings = 0;
        foreach (StateResult result in record.States)
        {
            StateJob state = job.States.Single(
                each => each.Output.Name == result.Output && each.State.Name == result.State);
            int taken = result.Points.Sum(point => point.Readings.Count);
            readings += taken;
            scaled += (result.Points.Count * (contact + state.State.Settle)) + (taken * state.Meter.Integration);
        }

        if (job.Fixture.BoardSupply is { } supply)
        {
            List<StateJob> outputs = [.. job.States.DistinctBy(state => state.Output.Name)];
            readings += outputs.Count;
            scaled += supply.WarmUp + (outputs.Count * contact);
            scaled += outputs.Aggregate(TimeSpan.Zero, (sum, state) => sum + state.Meter.Integration);
        }

        return (scaled * timeScale) + (readings * turnaround);
    }
}
