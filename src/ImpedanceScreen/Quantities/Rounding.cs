using System.Globalization;

namespace ImpedanceScreen.Quantities;

/// <summary>The one owner of rounding for the record.</summary>
public static class Rounding
{
    /// <summary>Significant digits of estimates, uncertainties and what is decided from them.</summary>
    public const int EstimateDigits = 9;

    /// <summary>Significant digits of budget terms.</summary>
    public const int BudgetDigits = 4;

    /// <summary>
    /// Rounds to significant decimal digits: the exact decimal expansion of the value is rounded (halves away from
    /// zero)
    /// and the nearest double to it returned, so that rounding again changes nothing. Negative zero becomes zero;
    /// what is
    /// not finite stays as it is.
    /// </summary>
    /// <param name="value">The value.</param>
    /// <param name="digits">1 to 15.</param>
    public static double Significant(double value, int digits)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(digits, 1);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(digits, 15);
        if (value == 0 || !double.IsFinite(value))
        {
            return value == 0 ? 0 : value;
        }

        Span<char> text = stackalloc char[32];
        Span<char> format = stackalloc char[3];
        format[0] = 'E';
        (digits - 1).TryFormat(format[1..], out int length, default, CultureInfo.InvariantCulture);
        value.TryFormat(text, out int written, format[..(1 + length)], CultureInfo.InvariantCulture);
        return double.Parse(text[..written], NumberStyles.Float, CultureInfo.InvariantCulture);
    }
}
