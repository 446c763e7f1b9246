using System.Globalization;

namespace ImpedanceScreen.Files;

/// <summary>What a number in a file may be, in the unit of its key.</summary>
/// <param name="Min">Lowest value.</param>
/// <param name="Max">Highest value.</param>
/// <param name="MinExcluded">Whether the lowest value itself is refused.</param>
public readonly record struct NumberRange(double Min, double Max, bool MinExcluded = false)
{
    /// <summary>Any finite number.</summary>
    public static NumberRange Any { get; } = new(double.NegativeInfinity, double.PositiveInfinity);

    /// <summary>Zero or more.</summary>
    public static NumberRange ZeroOrMore { get; } = new(0.0, double.PositiveInfinity);

    /// <summary>More than zero.</summary>
    public static NumberRange Positive { get; } = new(0.0, double.PositiveInfinity, MinExcluded: true);

    /// <summary>More than zero and at most so much.</summary>
    public static NumberRange PositiveUpTo(double max) => new(0.0, max, MinExcluded: true);

    /// <summary>Zero or more and at most so much.</summary>
    public static NumberRange UpTo(double max) => new(0.0, max);

    /// <summary>Whether the range holds a value; NaN lies in no range.</summary>
    public bool Holds(double value) => value <= Max && (MinExcluded ? value > Min : value >= Min);

    /// <summary>The range in words, as <c>more than 0 and at most 60</c>.</summary>
    public override string ToString()
    {
        string min = (MinExcluded ? "more than " : "at least ") + Min.ToString(CultureInfo.InvariantCulture);
        string max = "at most " + Max.ToString(CultureInfo.InvariantCulture);
        return (double.IsFinite(Min), double.IsFinite(Max)) switch
        {
            (true, true) => $"{min} and {max}",
            (true, false) => min,
            (false, true) => max,
            _ => "any finite number",
        };
    }
}
