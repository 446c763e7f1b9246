using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Decisions;

/// <summary>The values that a limit accepts once its guard band is taken off (JCGM 106:2012, clause 8).</summary>
public static class AcceptanceZone
{
    /// <summary>
    /// Whether no value at all could pass: for a two-sided limit the guard bands 2 w take up the whole tolerance.
    /// </summary>
    /// <param name="limit">The limit.</param>
    /// <param name="expandedUncertainty">Planned expanded uncertainty U for p = 0.95 in the quantity's unit.</param>
    public static bool IsEmpty(QuantityLimit limit, double expandedUncertainty)
    {
        ArgumentNullException.ThrowIfNull(limit);
        if (limit.Rule.IsSimple)
        {
            return limit.Min > limit.Max;
        }

        double guard = limit.Rule.GuardFactor * expandedUncertainty;
        return !double.IsFinite(guard) || (limit is { Min: { } min, Max: { } max } && 2 * guard >= max - min);
    }
}
