using System.Globalization;
using ImpedanceScreen.Decisions;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Station.Showing;

/// <summary>Limits and values of a decision as a person reads them.</summary>
internal static class QuantityText
{
    public static string Name(LimitDecision limit) => limit.Quantity switch
    {
        Quantity.SourceVoltage => "Vth",
        Quantity.InternalResistance => "Rth",
        _ => $"droop at {UncertainText.Resistance(limit.RatedLoadOhm ?? double.NaN)}",
    };

    public static string Value(LimitDecision limit) =>
        double.IsNaN(limit.Value)
            ? "no estimate"
            : limit.Quantity switch
            {
                Quantity.SourceVoltage => UncertainText.Voltage(limit.Value, limit.ExpandedUncertainty),
                Quantity.InternalResistance => UncertainText.Resistance(limit.Value, limit.ExpandedUncertainty),
                _ => UncertainText.Percent(limit.Value, limit.ExpandedUncertainty),
            };

    public static string Limits(LimitDecision limit) => (limit.Min, limit.Max) switch
    {
        ({ } min, { } max) => $"{Plain(limit, min)} … {Plain(limit, max)}",
        ({ } min, null) => $"≥ {Plain(limit, min)}",
        (null, { } max) => $"≤ {Plain(limit, max)}",
        _ => "",
    };

    public static string GuardBand(LimitDecision limit) => limit.GuardFactor == 0
        ? "simple"
        : Plain(limit, Rounding.Significant(limit.GuardBand, 2));

    public static string Probability(double probability) => probability switch
    {
        double.NaN => "-",
        > 0.9999 => "> 99.99 %",
        < 0.0001 => "< 0.01 %",
        _ => (100 * probability).ToString("0.00", CultureInfo.InvariantCulture) + " %",
    };

    private static string Plain(LimitDecision limit, double value) => limit.Quantity switch
    {
        Quantity.SourceVoltage => UncertainText.Voltage(value),
        Quantity.InternalResistance => UncertainText.Resistance(value),
        _ => UncertainText.Percent(value),
    };
}
