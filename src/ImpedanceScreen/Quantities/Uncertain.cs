namespace ImpedanceScreen.Quantities;

/// <summary>A value with its standard uncertainty, both in the unit that the member holding it names.</summary>
/// <param name="Value">The best estimate.</param>
/// <param name="StandardUncertainty">Standard uncertainty (k = 1), zero or more.</param>
public readonly record struct Uncertain(double Value, double StandardUncertainty);
