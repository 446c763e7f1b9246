using System.Globalization;

namespace ImpedanceScreen.SimulatedBench.Populations;

/// <summary>Serial numbers that count on in their trailing digits.</summary>
public static class SerialLabel
{
    /// <summary>The label that stands so many places behind another.</summary>
    /// <param name="first">A label that ends in digits.</param>
    /// <param name="places">How many places behind it, 0 or more.</param>
    /// <exception cref="FormatException">The label does not end in digits, or there are too few of them.</exception>
    public static string After(string first, long places)
    {
        ArgumentNullException.ThrowIfNull(first);
        string stem = first.TrimEnd('0', '1', '2', '3', '4', '5', '6', '7', '8', '9');
        int digits = first.Length - stem.Length;
        if (!long.TryParse(first.AsSpan(stem.Length), NumberStyles.None, CultureInfo.InvariantCulture, out long number))
        {
            throw new FormatException($"The serial number '{first}' does not end in digits to count on.");
        }

        string counted = (number + places).ToString(CultureInfo.InvariantCulture).PadLeft(digits, '0');
        return counted.Length == digits
            ? stem + counted
            : throw new FormatException($"The digits of '{first}' do not suffice for {places} more boards.");
    }
}
