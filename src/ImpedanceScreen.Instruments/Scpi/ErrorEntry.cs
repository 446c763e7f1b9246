using System.Globalization;

namespace ImpedanceScreen.Instruments.Scpi;

/// <summary>One entry of an instrument's error queue: <c>number,"text"</c> (SCPI-1999 Volume 2, 21.8).</summary>
/// <param name="Number">Its number; 0 when the queue is empty.</param>
/// <param name="Text">Its text as sent, without quotation marks.</param>
public sealed record ErrorEntry(int Number, string Text)
{
    /// <summary>
    /// Reads the answer to <c>SYSTem:ERRor?</c>. Only the number before the comma says whether it is an error.
    /// </summary>
    /// <exception cref="ScpiException">It is no such answer.</exception>
    public static ErrorEntry Parse(string answer)
    {
        ArgumentNullException.ThrowIfNull(answer);
        int comma = answer.IndexOf(',', StringComparison.Ordinal);
        ReadOnlySpan<char> number = comma < 0 ? answer : answer.AsSpan(0, comma);
        string text = comma < 0 ? string.Empty : answer[(comma + 1)..].Trim().Trim('"');
        return int.TryParse(number.Trim(), NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture, out int value)
            ? new(value, text)
            : throw new ScpiException(
                ScpiFault.NotAnErrorEntry, $"'{ScpiNumber.Shown(answer)}' is no entry of an error queue.");
    }
}
