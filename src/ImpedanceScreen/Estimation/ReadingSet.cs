using ImpedanceScreen.Bench;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Estimation;

/// <summary>Readings of one output in one drive state, sorted by what they are.</summary>
internal sealed class ReadingSet
{
    public ReadingSet(StateJob job, IReadOnlyList<LoadPointReadings> readings)
    {
        Job = job;
        All = readings;
        Rail = [.. readings.Where(read => read.Point.Sensed == Sensed.LoadReturn)];
        Output = [.. readings.Where(read => read.Point.Sensed == Sensed.Output)];
        Loaded = [.. Output.Where(read => read.Point.Load is not null)];
        Unloaded = [.. Output.Where(read => read.Point.Load is null)];
    }

    public StateJob Job { get; }

    public IReadOnlyList<LoadPointReadings> All { get; }

    public LoadPointReadings[] Rail { get; }

    public LoadPointReadings[] Output { get; }

    public LoadPointReadings[] Loaded { get; }

    public LoadPointReadings[] Unloaded { get; }

    /// <summary>True once the output was read unloaded again after its loads.</summary>
    public bool ReadUnloadedAgain => Loaded.Length > 0 && Output[^1].Point.Load is null;

    /// <summary>True where the plan was worked off: every load, and unloaded before and after.</summary>
    public bool IsComplete =>
        ReadUnloadedAgain && Output[0].Point.Load is null
        && Job.Loads.All(load => Array.Exists(Loaded, read => read.Point.Load == load));

    /// <summary>True where every point has a reading and every reading is a voltage.</summary>
    public bool IsNumeric => All.All(read => read.Readings.Count > 0
        && read.Readings.All(reading => reading.Condition == ReadingCondition.Valid && double.IsFinite(reading.Volt)));

    /// <summary>Mean of the rail; null where it was not read.</summary>
    public PointMean? RailMean => Rail.Length == 0 ? null : Mean(Rail[^1]);

    public static PointMean Mean(LoadPointReadings read) =>
        new(read.Point.Load, read.Readings.Average(reading => reading.Volt), read.Readings.Count);

    public StateMeasurement Measure(IEnumerable<LoadPointReadings> points, Uncertain? temperatureDegC) =>
        new(Job, points.Select(Mean), RailMean, temperatureDegC);
}
