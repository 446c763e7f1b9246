using ImpedanceScreen.Decisions;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// What a plan promises: the uncertainty that its readings would have if the output were the nominal source.
/// </summary>
public static class PlannedUncertainty
{
    /// <summary>Expanded uncertainty U for p = 0.95 of each limit, in the order of the state's limits.</summary>
    /// <param name="job">The output and state.</param>
    /// <param name="temperatureDegC">Temperature beside the loads as the sensor will know it; null without a
    /// sensor.</param>
    /// <returns>Infinity where the plan cannot determine the quantity at all.</returns>
    public static IReadOnlyList<double> Of(StateJob job, Uncertain? temperatureDegC)
    {
        ArgumentNullException.ThrowIfNull(job);
        StateMeasurement measurement = Nominal(job, temperatureDegC);
        SourceFit fit = SourceFitter.Fit(measurement.Problem);
        SourceEstimate? estimate = fit.Converged ? SourceEstimate.Of(measurement, fit) : null;
        return [.. job.State.Limits.Select(limit => Expanded(estimate, limit))];
    }

    private static double Expanded(SourceEstimate? estimate, QuantityLimit limit)
    {
        if (estimate is null)
        {
            return double.PositiveInfinity;
        }

        ErrorDistribution error = estimate.Of(limit).Error;
        double expanded = error.StandardUncertainty * error.CoverageFactor(LimitJudge.Probability);
        return double.IsFinite(expanded) ? expanded : double.PositiveInfinity;
    }

    private static StateMeasurement Nominal(StateJob job, Uncertain? temperatureDegC)
    {
        NominalSource nominal = job.State.Nominal;
        double back = job.LoadReturn?.VoltageVolt.Value ?? 0;
        int count = job.State.ReadingsPerLoadPoint;
        double meter = 1 / job.Range.InputOhm;
        PointMean At(Fixtures.Load? load)
        {
            double lead = job.Output.LeadOhm.Value;
            bool twoWire = job.Output.Sensing == Fixtures.Sensing.TwoWire;
            double path = load is null ? 0 : load.ResistanceOhm + load.BranchOhm.Value + (twoWire ? 0 : lead);
            double ohm = nominal.InternalResistanceOhm + (twoWire ? lead : 0);
            double siemens = load is null ? 0 : 1 / path;
            return new(load, new SourceModel(nominal.SourceVoltageVolt, ohm, back, siemens, meter).Volt, count);
        }

        PointMean[] means = [At(null), At(null), .. job.Loads.Select(At)];
        PointMean? rail = job.LoadReturn is null ? null : new PointMean(null, back, count);
        return new(job, means, rail, temperatureDegC);
    }
}
