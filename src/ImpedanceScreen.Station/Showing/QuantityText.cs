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
        _ => $"droop at {Measure.Format(limit.RatedLoadOhm ?? double.NaN, Unit.Ohm)}",
    };

    public static string Value(LimitDecision limit) =>
        double.IsNaN(limit.Value)
            ? "no estimate"
            : Measure.Format(new Expanded(limit.Value, limit.ExpandedUncertainty), UnitOf(limit.Quantity));

    public static string Limits(LimitDecision limit)
    {
        Unit unit = UnitOf(limit.Quantity);
        return (limit.Min, limit.Max) switch
        {
            ({ } min, { } max) => $"{Measure.Format(min, unit)} … {Measure.Format(max, unit)}",
            ({ } min, null) => $"≥ {Measure.Format(min, unit)}",
            (null, { } max) => $"≤ {Measure.Format(max, unit)}",
            _ => "",
        };
    }

    public static string GuardBand(LimitDecision limit) => Measure.Format(limit.GuardBand, UnitOf(limit.Quantity), 2);

    public static string Probability(double probability) => probability switch
    {
        > 0.9999 => "> 99.99 %",
        < 0.0001 => "< 0.01 %",
        _ => (100 * probability).ToString("0.00", CultureInfo.InvariantCulture) + " %",
    };

    private static Unit UnitOf(Quantity quantity) => quantity switch
    {
        Quantity.SourceVoltage => Unit.Volt,
        Quantity.InternalResistance => Unit.Ohm,
        _ => Unit.Percent,
    };
}
