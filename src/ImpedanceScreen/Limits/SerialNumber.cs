using System.Text.RegularExpressions;

namespace ImpedanceScreen.Limits;

/// <summary>Serial numbers against a limit file's pattern.</summary>
public static class SerialNumber
{
    /// <summary>Makes a pattern that a whole serial number must match, in time proportional to its length.</summary>
    /// <exception cref="ArgumentException">The pattern is not a regular expression.</exception>
    /// <exception cref="NotSupportedException">The pattern uses a construct that can take for ever.</exception>
    public static Regex Compile(string pattern)
    {
        // The pattern is compiled by itself first: `a)(b` is no pattern, though it would be one between brackets.
        _ = Make(pattern);
        return Make($@"\A(?:{pattern})\z");
    }

    private static Regex Make(string pattern) =>
        new(pattern, RegexOptions.NonBacktracking | RegexOptions.CultureInvariant, Regex.InfiniteMatchTimeout);
}
