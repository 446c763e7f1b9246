using System.Globalization;

namespace ImpedanceScreen.Files;

/// <summary>Turns single values into their types, by the invariant culture, and says in words what is wrong.</summary>
internal static class ScalarParser
{
    /// <summary>Parses one value: the value, or what is wrong with it.</summary>
    internal delegate bool Parse<T>(YamlScalar scalar, out T value, out string problem);

    internal static bool Number(YamlScalar scalar, out double value, out string problem)
    {
        const NumberStyles styles =
            NumberStyles.AllowLeadingSign | NumberStyles.AllowDecimalPoint | NumberStyles.AllowExponent;
        if (!IsPlainNumber(scalar, "a number", out problem))
        {
            value = double.NaN;
            return false;
        }

        if (!double.TryParse(scalar.Text, styles, CultureInfo.InvariantCulture, out value))
        {
            problem = $"`{Shorten(scalar.Text)}` is not a number";
            return false;
        }

        if (!double.IsFinite(value))
        {
            problem = $"`{Shorten(scalar.Text)}` is not a finite number";
            return false;
        }

        return true;
    }

    internal static bool Integer(YamlScalar scalar, out int value, out string problem)
    {
        if (!IsPlainNumber(scalar, "a whole number", out problem))
        {
            value = 0;
            return false;
        }

        if (!int.TryParse(scalar.Text, NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture, out value))
        {
            problem = $"`{Shorten(scalar.Text)}` is not a whole number";
            return false;
        }

        return true;
    }

    internal static bool Flag(YamlScalar scalar, out bool value, out string problem)
    {
        value = scalar is { IsPlain: true, Text: "true" };
        bool good = value || scalar is { IsPlain: true, Text: "false" };
        problem = good ? "" : $"`{Shorten(scalar.Text)}` is neither true nor false";
        return good;
    }

    internal static bool Date(YamlScalar scalar, out DateOnly value, out string problem)
    {
        bool good = DateOnly.TryParseExact(
            scalar.Text, "yyyy-MM-dd", CultureInfo.InvariantCulture, DateTimeStyles.None, out value);
        problem = good ? "" : $"`{Shorten(scalar.Text)}` is not a date written as 2026-03-31";
        return good;
    }

    internal static bool Text(YamlScalar scalar, out string value, out string problem)
    {
        value = scalar.Text;
        bool good = !value.Any(char.IsControl);
        problem = good ? "" : "the text holds a control character or a line break";
        return good;
    }

    /// <summary>The text on one line and short enough for a message.</summary>
    internal static string Shorten(string text)
    {
        string line = string.Concat(text.Select(letter => char.IsControl(letter) ? ' ' : letter));
        return line.Length <= 40 ? line : line[..37] + "...";
    }

    // 010 is eight to one reader of YAML and ten to another: it is refused, as every form but plain decimals is.
    private static bool IsPlainNumber(YamlScalar scalar, string what, out string problem)
    {
        string digits = scalar.Text.TrimStart('+', '-');
        bool octal = digits.Length > 1 && digits[0] == '0' && char.IsAsciiDigit(digits[1]);
        problem = (scalar.IsPlain, octal) switch
        {
            (false, _) => $"\"{Shorten(scalar.Text)}\" is text, not {what}",
            (_, true) => $"`{Shorten(scalar.Text)}` is not {what}: it begins with 0",
            _ => "",
        };
        return problem.Length == 0;
    }
}
