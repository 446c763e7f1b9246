using ImpedanceScreen.Estimation;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Decisions;

/// <summary>
/// Decides about one limit by simple or guarded acceptance (JCGM 106:2012, ISO 14253-1), from the values as they are
/// recorded.
/// </summary>
public static class LimitJudge
{
    /// <summary>Probability of the intervals on which guard bands rest.</summary>
    public const double Probability = 0.95;

    /// <summary>Decides.</summary>
    /// <param name="limit">The limit.</param>
    /// <param name="value">The estimate in the quantity's unit.</param>
    /// <param name="error">Distribution of its error.</param>
    /// <param name="plannedUncertainty">
    /// Expanded uncertainty that the plan promises; the guard band rests on it where the measurement's own is smaller.
    /// </param>
    public static LimitDecision Judge(
        QuantityLimit limit, double value, ErrorDistribution error, double plannedUncertainty)
    {
        ArgumentNullException.ThrowIfNull(limit);
        double estimate = Rounded(value);
        double expanded = Rounded(error.StandardUncertainty * error.CoverageFactor(Probability));
        if (!double.IsFinite(estimate) || !double.IsFinite(expanded))
        {
            return WithoutEstimate(limit);
        }

        double factor = limit.Rule.GuardFactor;
        double guard = limit.Rule.IsSimple ? 0 : Rounded(factor * Math.Max(expanded, plannedUncertainty));
        double above = error.Cumulative((limit.Min ?? double.NegativeInfinity) - estimate);
        double below = error.Cumulative(estimate - (limit.Max ?? double.PositiveInfinity));
        double conformity = Rounded(Math.Max(0, 1 - above - below));
        return new(
            limit.Quantity, limit.RatedLoadOhm, estimate, expanded, limit.Min, limit.Max, factor, guard, conformity,
            Decide(estimate, limit.Min, limit.Max, guard));
    }

    /// <summary>The decision where there is no estimate: none.</summary>
    public static LimitDecision WithoutEstimate(QuantityLimit limit)
    {
        ArgumentNullException.ThrowIfNull(limit);
        return new(
            limit.Quantity, limit.RatedLoadOhm, double.NaN, double.NaN, limit.Min, limit.Max, limit.Rule.GuardFactor,
            double.NaN, double.NaN, Decision.Undecided);
    }

    /// <summary>
    /// Any fail is a fail, else any undecided is undecided, else pass: of limits about an output, of outputs about a
    /// board. Of nothing there is no decision.
    /// </summary>
    public static Decision Combine(IEnumerable<Decision> decisions)
    {
        ArgumentNullException.ThrowIfNull(decisions);
        Decision combined = Decision.Undecided;
        bool any = false;
        foreach (Decision decision in decisions)
        {
            if (decision == Decision.Fail)
            {
                return Decision.Fail;
            }

            combined = decision == Decision.Undecided || (any && combined == Decision.Undecided)
                ? Decision.Undecided
                : Decision.Pass;
            any = true;
        }

        return combined;
    }

    private static Decision Decide(double value, double? min, double? max, double guard)
    {
        if (!double.IsFinite(guard))
        {
            return Decision.Undecided;
        }

        bool inside = !(value < min + guard) && !(value > max - guard);
        if (inside)
        {
            return Decision.Pass;
        }

        return value <= min - guard || value >= max + guard ? Decision.Fail : Decision.Undecided;
    }

    private static double Rounded(double value) => Rounding.Significant(value, Rounding.EstimateDigits);
}
