using System.Globalization;

namespace ImpedanceScreen.Screening.Serials;

/// <summary>Serial numbers that count up.</summary>
public static class SerialRange
{
    /// <summary>
    /// Counts up from a serial number that ends in digits; their number is kept: <c>T6-000009</c>, <c>T6-000010</c>.
    /// </summary>
    /// <exception cref="FormatException">It does not end in digits, or the digits do not suffice for the
    /// count.</exception>
    public static IReadOnlyList<string> From(string first, int count)
    {
        ArgumentNullException.ThrowIfNull(first);
        ArgumentOutOfRangeException.ThrowIfNegativeOrZero(count);
        int digits = first.Length - first.AsSpan().TrimEnd("0123456789").Length;
        if (digits is 0 or > 18)
        {
            throw new FormatException(
                $"serial number '{first}' does not end in 1 to 18 digits, so that it cannot be counted up");
        }

        string prefix = first[..^digits];
        long start = long.Parse(first.AsSpan(prefix.Length), NumberStyles.None, CultureInfo.InvariantCulture);
        string last = (start + count - 1).ToString(CultureInfo.InvariantCulture);
        if (last.Length > digits)
        {
            throw new FormatException($"counting {count} up from '{first}' needs more than its {digits} digits");
        }

        return
        [
            .. Enumerable.Range(0, count).Select(
                i => prefix + (start + i).ToString(CultureInfo.InvariantCulture).PadLeft(digits, '0')),
        ];
    }
}
