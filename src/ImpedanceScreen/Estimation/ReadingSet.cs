using ImpedanceScreen.Bench;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Estimation;

/// <summary>Readings of one output in one drive state, sorted by what they are.</summary>
internal sealed class ReadingSet
{
    // A mean of readings lies this many of one reading's standard deviations off at most.
    private const double RailNoiseCoverage = 5.0;

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

    /// <summary>
    /// Whether the rail that the loads return to reads what the fixture file states, within its own and the meter's
    /// uncertainty; true where no rail was read.
    /// </summary>
    public bool IsRailAsStated
    {
        get
        {
            if (RailMean is not { } rail)
            {
                return true;
            }

            Window stated = SafeLoading.ReturnVolt(Job.LoadReturn);
            double meter = Job.Range.OffsetLimitVolt + (Job.Range.GainLimit * Math.Abs(rail.Volt))
                + (RailNoiseCoverage * Job.Range.NoiseVolt);
            return rail.Volt >= stated.Min - meter && rail.Volt <= stated.Max + meter;
        }
    }

    public static PointMean Mean(LoadPointReadings read) =>
        new(read.Point.Load, read.Readings.Average(reading => reading.Volt), read.Readings.Count);

    public StateMeasurement Measure(IEnumerable<LoadPointReadings> points, Uncertain? temperatureDegC) =>
        new(Job, points.Select(Mean), RailMean, temperatureDegC);
}
