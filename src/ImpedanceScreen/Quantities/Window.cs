namespace ImpedanceScreen.Quantities;

/// <summary>A closed interval in the unit that the member holding it names.</summary>
/// <param name="Min">Lower end.</param>
/// <param name="Max">Upper end, not below <paramref name="Min"/>.</param>
public readonly record struct Window(double Min, double Max)
{
    /// <summary>Whether the value lies in the interval, ends included. NaN lies in no interval.</summary>
    public bool Contains(double value) => value >= Min && value <= Max;

    /// <summary>The largest magnitude in the interval.</summary>
    public double LargestMagnitude => Math.Max(Math.Abs(Min), Math.Abs(Max));
}
