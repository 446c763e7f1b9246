using ImpedanceScreen.Decisions;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Estimation;

/// <summary>A fitted measurement with its budget: what every limited quantity is and how wrong it may be.</summary>
internal sealed class SourceEstimate
{
    private readonly SourceFit fit;
    private readonly UncertaintyBudget budget;
    private readonly double returnVolt;

    private SourceEstimate(in SourceFit fit, UncertaintyBudget budget, StateMeasurement measurement)
    {
        this.fit = fit;
        this.budget = budget;
        returnVolt = measurement.ReturnVolt;
        SourceVolt = fit.SourceVoltageVolt;
        InternalOhm = fit.ResistanceOhm - measurement.SubtractedLeadOhm.Value;
    }

    public double SourceVolt { get; }

    public double InternalOhm { get; }

    /// <summary>Forms it from a converged fit; null where the readings do not determine it.</summary>
    public static SourceEstimate? Of(StateMeasurement measurement, in SourceFit fit) =>
        UncertaintyBudget.Of(measurement, fit.SourceVoltageVolt, fit.ResistanceOhm) is { } budget
            ? new(fit, budget, measurement)
            : null;

    /// <summary>Value of a limited quantity and the distribution of its error.</summary>
    public (double Value, ErrorDistribution Error) Of(QuantityLimit limit) => limit.Quantity switch
    {
        Quantity.SourceVoltage => (SourceVolt, budget.Along(1, 0, 0)),
        Quantity.InternalResistance => (InternalOhm, budget.Along(0, 1, 0)),
        Quantity.Droop => Droop(limit.RatedLoadOhm ?? throw new ArgumentException("No rated load.", nameof(limit))),
        _ => throw new ArgumentOutOfRangeException(nameof(limit)),
    };

    /// <summary>The estimate as it is recorded.</summary>
    public Estimate Recorded()
    {
        double volt = budget.VoltUncertainty;
        double ohm = budget.OhmUncertainty;
        return new(
            Rounded(SourceVolt),
            Rounded(InternalOhm),
            Rounded(volt),
            Rounded(ohm),
            Rounded(Math.Clamp(budget.Covariance / (volt * ohm), -1, 1)),
            Rounded(budget.Along(1, 0, 0).CoverageFactor(LimitJudge.Probability)),
            Rounded(budget.Along(0, 1, 0).CoverageFactor(LimitJudge.Probability)),
            Rounded(fit.ChiSquared),
            fit.DegreesOfFreedom,
            Rounded(fit.PValue),
            budget.Lines());
    }

    // From unloaded to the rated load, as a fraction of the unloaded voltage: R/(R + RL) (1 - Vret/Vth).
    private (double Value, ErrorDistribution Error) Droop(double ratedOhm)
    {
        double whole = InternalOhm + ratedOhm;
        double divider = InternalOhm / whole;
        double drive = 1 - (returnVolt / SourceVolt);
        ErrorDistribution error = budget.Along(
            divider * returnVolt / (SourceVolt * SourceVolt),
            ratedOhm / (whole * whole) * drive,
            -divider / SourceVolt);
        return (divider * drive, error);
    }

    private static double Rounded(double value) => Rounding.Significant(value, Rounding.EstimateDigits);
}
