using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Estimation;

/// <summary>The mean at one load point.</summary>
/// <param name="Load">Its load; null for unloaded.</param>
/// <param name="Volt">Mean reading, V.</param>
/// <param name="Count">Number of readings.</param>
internal readonly record struct PointMean(Load? Load, double Volt, int Count);

/// <summary>What is common to all loads of a measurement.</summary>
/// <param name="Name">Its name.</param>
/// <param name="Distribution">Its distribution.</param>
/// <param name="Ohm">For each load, by how much its path grows for one standard uncertainty, Ω.</param>
internal sealed record CommonTerm(string Name, InputDistribution Distribution, double[] Ohm);

/// <summary>
/// One output in one drive state as measured: means, load paths at the temperature and power of the moment, and what is
/// uncertain about them.
/// </summary>
internal sealed class StateMeasurement
{
    /// <summary>
    /// Assumed beside the loads where no sensor says otherwise: an ordinary workshop, 23 °C within 5 K.
    /// </summary>
    public static readonly Uncertain AssumedTemperatureDegC = new(23, 5 / Math.Sqrt(3));

    private static readonly double Root12 = Math.Sqrt(12);

    private readonly FitPoint[] fitPoints;
    private readonly FitLoad[] fitLoads;
    private readonly double[] commonOhm;

    /// <summary>Prepares a measurement.</summary>
    /// <param name="job">The output and state.</param>
    /// <param name="means">At least two points, unloaded first, loads in the plan's order; no overload among
    /// them.</param>
    /// <param name="rail">Mean reading of the return rail; null where loads return to common or it was not
    /// read.</param>
    /// <param name="temperatureDegC">Temperature beside the loads; null where it was not measured.</param>
    public StateMeasurement(
        StateJob job, IEnumerable<PointMean> means, PointMean? rail, Uncertain? temperatureDegC)
    {
        Job = job;
        Means = [.. means.OrderBy(mean => IndexOf(job, mean.Load))];
        Loads = [.. Means.Where(mean => mean.Load is not null).Select(mean => mean.Load!).Distinct()];
        (ReturnVolt, ReturnUncertaintyVolt, ReturnSharesMeter) = ReturnOf(job, rail);
        Paths = [.. Loads.Select(load => new LoadPath(job, load, temperatureDegC, CurrentAt(load)))];
        Commons = [.. CommonTerms(temperatureDegC)];
        fitPoints = [.. Means.Select(mean => new FitPoint(mean.Volt, PointUncertainty(mean), LoadIndex(mean.Load)))];
        fitLoads = [.. Paths.Select(path => new FitLoad(path.Ohm, path.IndividualOhm))];
        commonOhm = [.. Loads.SelectMany((_, load) => Commons.Select(term => term.Ohm[load]))];
    }

    public StateJob Job { get; }

    public PointMean[] Means { get; }

    public Load[] Loads { get; }

    public LoadPath[] Paths { get; }

    public CommonTerm[] Commons { get; }

    public double ReturnVolt { get; }

    public double ReturnUncertaintyVolt { get; }

    public bool ReturnSharesMeter { get; }

    public double MeterSiemens => 1 / Job.Range.InputOhm;

    public double OffsetUncertaintyVolt => Job.Range.OffsetLimitVolt / Math.Sqrt(3);

    public double ResolutionUncertaintyVolt => Job.Range.ResolutionVolt / Root12;

    /// <summary>What two-wire sensing adds to the internal resistance, Ω.</summary>
    public Uncertain SubtractedLeadOhm => Job.Output.Sensing == Sensing.TwoWire ? Job.Output.LeadOhm : default;

    public FitProblem Problem => new()
    {
        Points = fitPoints,
        Loads = fitLoads,
        CommonOhm = commonOhm,
        CommonCount = Commons.Length,
        MeterSiemens = MeterSiemens,
        ReturnVolt = ReturnVolt,
        ReturnUncertaintyVolt = ReturnUncertaintyVolt,
        OffsetUncertaintyVolt = OffsetUncertaintyVolt,
        ReturnSharesOffset = ReturnSharesMeter,
    };

    /// <summary>Index of a load among those measured; -1 for unloaded.</summary>
    public int LoadIndex(Load? load) => load is null ? -1 : Array.IndexOf(Loads, load);

    /// <summary>Noise of a mean, V.</summary>
    public double NoiseOf(PointMean mean) => Job.Range.NoiseVolt / Math.Sqrt(mean.Count);

    private double PointUncertainty(PointMean mean) =>
        double.Hypot(NoiseOf(mean), ResolutionUncertaintyVolt);

    private static int IndexOf(StateJob job, Load? load)
    {
        for (int i = 0; load is not null && i < job.Loads.Count; i++)
        {
            if (job.Loads[i] == load)
            {
                return i;
            }
        }

        return load is null ? -1 : job.Loads.Count;
    }

    // The same meter shares its offset and gain with the rail's reading; another meter is covered by the stated
    // uncertainty.
    private static (double Volt, double UncertaintyVolt, bool Shares) ReturnOf(StateJob job, PointMean? rail)
    {
        if (job.LoadReturn is not { } back)
        {
            return (0, 0, false);
        }

        if (rail is not { } read)
        {
            return (back.VoltageVolt.Value, back.VoltageVolt.StandardUncertainty, false);
        }

        return string.Equals(back.Meter, job.Meter.Name, StringComparison.Ordinal)
            ? (read.Volt, double.Hypot(job.Range.NoiseVolt / Math.Sqrt(read.Count),
                job.Range.ResolutionVolt / Root12), true)
            : (read.Volt, back.VoltageVolt.StandardUncertainty, false);
    }

    private double CurrentAt(Load load)
    {
        PointMean mean = Array.Find(Means, candidate => candidate.Load == load);
        return (mean.Volt - ReturnVolt) / (load.ResistanceOhm + load.BranchOhm.Value);
    }

    private IEnumerable<CommonTerm> CommonTerms(Uncertain? temperatureDegC)
    {
        foreach (IGrouping<string, LoadPath> group in Paths
            .Where(path => path.CommonOhm > 0).GroupBy(path => path.Load.Certificate, StringComparer.Ordinal))
        {
            yield return new(
                $"certificate {group.Key}", InputDistribution.Normal,
                [.. Paths.Select(path => path.Load.Certificate == group.Key ? path.CommonOhm : 0)]);
        }

        double kelvin = (temperatureDegC ?? AssumedTemperatureDegC).StandardUncertainty;
        if (Paths.Any(path => path.OhmPerKelvin * kelvin != 0))
        {
            yield return new(
                "load temperature",
                temperatureDegC is null ? InputDistribution.Rectangular : InputDistribution.Normal,
                [.. Paths.Select(path => path.OhmPerKelvin * kelvin)]);
        }

        if (Job.Output.Sensing == Sensing.Terminal && Job.Output.LeadOhm.StandardUncertainty > 0)
        {
            yield return new(
                "lead", InputDistribution.Normal, [.. Paths.Select(_ => Job.Output.LeadOhm.StandardUncertainty)]);
        }
    }
}
