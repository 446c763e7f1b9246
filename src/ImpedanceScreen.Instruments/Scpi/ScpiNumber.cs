using System.Globalization;
using System.Runtime.InteropServices;
using ImpedanceScreen.Bench;

namespace ImpedanceScreen.Instruments.Scpi;

/// <summary>
/// A numeric answer: NR1, NR2 or NR3 (IEEE 488.2-1992 8.7.2 to 8.7.4), where ±9.9E37 stands for infinity and 9.91E37
/// for not a number
/// (SCPI-1999 Volume 1, 7.2.1.4 and 7.2.1.5).
/// </summary>
/// <param name="Condition">Whether it is a number at all.</param>
/// <param name="Value">The number; NaN where it is none.</param>
[StructLayout(LayoutKind.Auto)]
public readonly record struct ScpiNumber(ReadingCondition Condition, double Value)
{
    private const double Infinity = 9.9e37;
    private const double NotANumber = 9.91e37;

    // Meters send the special values with fewer or more digits; the two lie 1 part in 1000 apart.
    private const double RelativeTolerance = 1e-6;

    /// <summary>Reads an answer; white space around it, CR included, is skipped.</summary>
    /// <exception cref="ScpiException">It is no number.</exception>
    public static ScpiNumber Parse(ReadOnlySpan<char> answer) => TryParse(answer, out ScpiNumber number)
        ? number
        : throw new ScpiException(ScpiFault.NotNumeric, $"'{Shown(answer)}' is no number.");

    /// <summary>Reads an answer.</summary>
    /// <returns>False where it is no number.</returns>
    public static bool TryParse(ReadOnlySpan<char> answer, out ScpiNumber number)
    {
        ReadOnlySpan<char> text = answer.Trim(" \t\r\n");
        number = default;

        // The runtime's parser alone would also take words such as Infinity.
        if (!IsNumeric(text)
            || !double.TryParse(text, NumberStyles.Float, CultureInfo.InvariantCulture, out double value))
        {
            return false;
        }

        number = value switch
        {
            _ when Math.Abs(value - NotANumber) <= NotANumber * RelativeTolerance =>
                new(ReadingCondition.NotANumber, double.NaN),
            _ when Math.Abs(value) >= Infinity * (1 - RelativeTolerance) => new(ReadingCondition.Overload, double.NaN),
            _ => new(ReadingCondition.Valid, value),
        };
        return true;
    }

    internal static string Shown(ReadOnlySpan<char> answer)
    {
        const int ShownLength = 60;
        string start = new(answer[..Math.Min(answer.Length, ShownLength)]);
        string clean = string.Concat(start.Select(c => char.IsControl(c) ? '?' : c));
        return answer.Length > ShownLength ? clean + "…" : clean;
    }

    // [sign] digits [. digits] [E [sign] digits], with a digit on either side of the point.
    private static bool IsNumeric(ReadOnlySpan<char> text)
    {
        text = SkipSign(text);
        int whole = CountDigits(text);
        text = text[whole..];
        int fraction = 0;
        if (text is ['.', ..])
        {
            fraction = CountDigits(text[1..]);
            text = text[(1 + fraction)..];
        }

        if (whole + fraction == 0 || text is not ['E' or 'e', ..])
        {
            return whole + fraction > 0 && text.IsEmpty;
        }

        text = SkipSign(text[1..]);
        return !text.IsEmpty && CountDigits(text) == text.Length;
    }

    private static ReadOnlySpan<char> SkipSign(ReadOnlySpan<char> text) => text is ['+' or '-', ..] ? text[1..] : text;

    private static int CountDigits(ReadOnlySpan<char> text)
    {
        int other = text.IndexOfAnyExceptInRange('0', '9');
        return other < 0 ? text.Length : other;
    }
}
