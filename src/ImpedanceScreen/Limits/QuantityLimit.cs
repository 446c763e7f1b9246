namespace ImpedanceScreen.Limits;

/// <summary>What a limit is about.</summary>
public enum Quantity
{
    /// <summary>Source voltage Vth, V.</summary>
    SourceVoltage,

    /// <summary>Internal resistance Rth, Ω.</summary>
    InternalResistance,

    /// <summary>Droop from unloaded to the rated load as a fraction of the unloaded voltage (0.05 is 5 %).</summary>
    Droop,
}

/// <summary>A one- or two-sided limit with its decision rule.</summary>
/// <param name="Quantity">What is limited.</param>
/// <param name="Min">Lower limit in the quantity's unit; null where there is none.</param>
/// <param name="Max">Upper limit in the quantity's unit; null where there is none. At least one of the two is
/// given.</param>
/// <param name="Rule">How uncertainty enters the decision.</param>
/// <param name="RatedLoadOhm">The rated load of a droop limit, Ω; null for the other quantities.</param>
public sealed record QuantityLimit(
    Quantity Quantity, double? Min, double? Max, DecisionRule Rule, double? RatedLoadOhm)
{
    /// <summary>Whether a value lies within the limits, ends included; NaN does not.</summary>
    public bool Holds(double value) => value >= (Min ?? double.MinValue) && value <= (Max ?? double.MaxValue);

    /// <summary>The limited quantity of a source loaded to common, in the quantity's unit.</summary>
    public double Of(NominalSource source)
    {
        ArgumentNullException.ThrowIfNull(source);
        return Quantity switch
        {
            Quantity.SourceVoltage => source.SourceVoltageVolt,
            Quantity.InternalResistance => source.InternalResistanceOhm,
            _ => source.InternalResistanceOhm / (source.InternalResistanceOhm + (RatedLoadOhm ?? 0.0)),
        };
    }
}

/// <summary>How uncertainty enters a decision (JCGM 106, ISO 14253-1).</summary>
/// <param name="GuardFactor">
/// The guard band w is this factor times the expanded uncertainty U for p = 0.95. Zero is simple acceptance: then no
/// decision is undecided and no specific risk is stated.
/// </param>
public sealed record DecisionRule(double GuardFactor)
{
    /// <summary>Simple acceptance.</summary>
    public static DecisionRule Simple { get; } = new(0.0);

    /// <summary>Whether this is simple acceptance.</summary>
    public bool IsSimple => GuardFactor == 0.0;
}
