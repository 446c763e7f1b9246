using System.Text.RegularExpressions;

namespace ImpedanceScreen.Screening.Serials;

/// <summary>Serial numbers against the pattern of a product.</summary>
public static class SerialPatterns
{
    /// <summary>Whether the whole serial number matches. The pattern was checked when its file was read.</summary>
    public static bool Matches(string pattern, string serial) =>
        Regex.IsMatch(serial, $"^(?:{pattern})$", RegexOptions.NonBacktracking | RegexOptions.CultureInvariant)
        && !serial.Contains('\n', StringComparison.Ordinal);
}
