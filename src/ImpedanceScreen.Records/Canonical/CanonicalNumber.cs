using System.Globalization;

namespace ImpedanceScreen.Records.Canonical;

/// <summary>The one text of a number: ECMAScript's Number-to-String, as RFC 8785 section 3.2.2.3 demands.</summary>
public static class CanonicalNumber
{
    /// <summary>Longest text of any number: sign, leading zeros or 21 digits, exponent.</summary>
    public const int LongestLength = 32;

    private const double LargestPlainWhole = 1e15;

    /// <summary>Writes a number as ASCII. A negative zero becomes <c>0</c>, as RFC 8785 demands.</summary>
    /// <param name="value">A finite number.</param>
    /// <param name="destination">At least <see cref="LongestLength"/> bytes.</param>
    /// <returns>How many bytes were written.</returns>
    /// <exception cref="ArgumentException">NaN or infinity: JSON has neither.</exception>
    public static int Format(double value, Span<byte> destination)
    {
        if (!double.IsFinite(value))
        {
            throw new ArgumentException("NaN and infinity have no place in canonical JSON.", nameof(value));
        }

        if (value == 0.0)
        {
            destination[0] = (byte)'0';
            return 1;
        }

        // Whole numbers of at most 15 digits, the commonest by far, need no search for the shortest digits.
        if (Math.Abs(value) < LargestPlainWhole && (long)value is var whole && whole == value)
        {
            whole.TryFormat(destination, out int digits, default, CultureInfo.InvariantCulture);
            return digits;
        }

        // The runtime's shortest round-trip digits are ECMAScript's; only the layout with an exponent differs.
        Span<byte> shortest = stackalloc byte[LongestLength];
        value.TryFormat(shortest, out int length, "R", CultureInfo.InvariantCulture);
        shortest = shortest[..length];
        int mark = shortest.IndexOf((byte)'E');
        if (mark < 0)
        {
            shortest.CopyTo(destination);
            return length;
        }

        int exponent = int.Parse(shortest[(mark + 1)..], NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture);
        return LayOut(shortest[..mark], exponent, destination);
    }

    private static int LayOut(ReadOnlySpan<byte> mantissa, int exponent, Span<byte> destination)
    {
        int at = 0;
        if (mantissa[0] == '-')
        {
            destination[at++] = (byte)'-';
            mantissa = mantissa[1..];
        }

        Span<byte> digits = stackalloc byte[LongestLength];
        int count = 0;
        foreach (byte character in mantissa)
        {
            if (character != '.')
            {
                digits[count++] = character;
            }
        }

        digits = digits[..count];
        return exponent switch
        {
            >= 0 and < 21 => at + Whole(digits, exponent, destination[at..]),
            < 0 and >= -6 => at + Fraction(digits, exponent, destination[at..]),
            _ => at + Scientific(digits, exponent, destination[at..]),
        };
    }

    private static int Whole(ReadOnlySpan<byte> digits, int exponent, Span<byte> destination)
    {
        int whole = exponent + 1;
        if (digits.Length > whole)
        {
            digits[..whole].CopyTo(destination);
            destination[whole] = (byte)'.';
            digits[whole..].CopyTo(destination[(whole + 1)..]);
            return digits.Length + 1;
        }

        digits.CopyTo(destination);
        destination[digits.Length..whole].Fill((byte)'0');
        return whole;
    }

    private static int Fraction(ReadOnlySpan<byte> digits, int exponent, Span<byte> destination)
    {
        int start = 1 - exponent;
        destination[..start].Fill((byte)'0');
        destination[1] = (byte)'.';
        digits.CopyTo(destination[start..]);
        return start + digits.Length;
    }

    private static int Scientific(ReadOnlySpan<byte> digits, int exponent, Span<byte> destination)
    {
        int at = 0;
        destination[at++] = digits[0];
        if (digits.Length > 1)
        {
            destination[at++] = (byte)'.';
            digits[1..].CopyTo(destination[at..]);
            at += digits.Length - 1;
        }

        destination[at++] = (byte)'e';
        destination[at++] = exponent < 0 ? (byte)'-' : (byte)'+';
        Math.Abs(exponent).TryFormat(destination[at..], out int length, default, CultureInfo.InvariantCulture);
        return at + length;
    }
}
