using System.Globalization;

namespace ImpedanceScreen.Quantities;

/// <summary>
/// Values for people: the expanded uncertainty rounded to two digits, the value to the same place, in a unit scaled to
/// the larger of the two. Culture-free. The record keeps SI units and never comes this way.
/// </summary>
public static class UncertainText
{
    private static readonly (double Size, string Name)[] Voltages = [(1, "V"), (1e-3, "mV")];
    private static readonly (double Size, string Name)[] Resistances = [(1e3, "kΩ"), (1, "Ω"), (1e-3, "mΩ")];
    private static readonly (double Size, string Name)[] Currents = [(1, "A"), (1e-3, "mA"), (1e-6, "µA")];
    private static readonly (double Size, string Name)[] Percents = [(1e-2, "%")];

    /// <summary>A voltage, as <c>2.4998 ± 0.0012 V</c>.</summary>
    public static string Voltage(double volt, double expandedVolt) => Format(volt, expandedVolt, Voltages);

    /// <summary>A resistance, as <c>50.12 ± 0.31 Ω</c>.</summary>
    public static string Resistance(double ohm, double expandedOhm) => Format(ohm, expandedOhm, Resistances);

    /// <summary>A current, as <c>12.1 ± 0.2 mA</c>.</summary>
    public static string Current(double ampere, double expandedAmpere) => Format(ampere, expandedAmpere, Currents);

    /// <summary>A fraction in percent, as <c>4.76 ± 0.03 %</c>.</summary>
    public static string Percent(double fraction, double expandedFraction) =>
        Format(fraction, expandedFraction, Percents);

    /// <summary>A voltage without uncertainty, four significant digits.</summary>
    public static string Voltage(double volt) => Format(volt, Voltages);

    /// <summary>A resistance without uncertainty, four significant digits.</summary>
    public static string Resistance(double ohm) => Format(ohm, Resistances);

    /// <summary>A current without uncertainty, four significant digits.</summary>
    public static string Current(double ampere) => Format(ampere, Currents);

    /// <summary>A fraction in percent without uncertainty, four significant digits.</summary>
    public static string Percent(double fraction) => Format(fraction, Percents);

    private static string Format(double value, (double Size, string Name)[] units)
    {
        (double size, string name) = UnitFor(Math.Abs(value), units);
        return double.IsFinite(value)
            ? $"{Plain(Rounding.Significant(value / size, 4))} {name}"
            : $"no value {name}";
    }

    private static string Format(double value, double expanded, (double Size, string Name)[] units)
    {
        if (!double.IsFinite(value) || !(expanded > 0) || double.IsInfinity(expanded))
        {
            return Format(value, units);
        }

        (double size, string name) = UnitFor(Math.Max(Math.Abs(value), expanded), units);
        double rounded = Rounding.Significant(expanded / size, 2);
        int exponent = (int)Math.Floor(Math.Log10(rounded) + 1e-9);
        int decimals = Math.Clamp(1 - exponent, 0, 15);
        double step = exponent > 1 ? Math.Pow(10, exponent - 1) : 1;
        string format = "F" + decimals.ToString(CultureInfo.InvariantCulture);
        double whole = Math.Round(value / size / step, MidpointRounding.AwayFromZero) * step;
        double shown = decimals > 0 ? value / size : whole;
        string text = Positive(shown.ToString(format, CultureInfo.InvariantCulture));
        return $"{text} ± {rounded.ToString(format, CultureInfo.InvariantCulture)} {name}";
    }

    private static (double Size, string Name) UnitFor(double magnitude, (double Size, string Name)[] units)
    {
        foreach ((double Size, string Name) unit in units)
        {
            if (magnitude >= unit.Size)
            {
                return unit;
            }
        }

        return magnitude == 0 || !double.IsFinite(magnitude) ? units[Math.Min(1, units.Length - 1)] : units[^1];
    }

    // A value that rounds to zero has no sign.
    private static string Positive(string text) =>
        text.AsSpan().ContainsAnyInRange('1', '9') ? text : text.TrimStart('-');

    private static string Plain(double value) => value.ToString("0.###############", CultureInfo.InvariantCulture);
}
