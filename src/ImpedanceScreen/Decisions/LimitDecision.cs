using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Decisions;

/// <summary>The decision about one limit, with everything it was made from.</summary>
/// <param name="Quantity">What is limited.</param>
/// <param name="RatedLoadOhm">Rated load of a droop limit, Ω; null otherwise.</param>
/// <param name="Value">The estimate in the quantity's unit, rounded as recorded; NaN where there is none.</param>
/// <param name="ExpandedUncertainty">U for p = 0.95 in the quantity's unit; NaN where there is none.</param>
/// <param name="Min">Lower limit; null where none.</param>
/// <param name="Max">Upper limit; null where none.</param>
/// <param name="GuardFactor">Factor of the decision rule.</param>
/// <param name="GuardBand">Guard band w in the quantity's unit.</param>
/// <param name="ConformityProbability">Probability that the true value lies within the limits (JCGM 106:2012, clause
/// 7); NaN where there is no estimate.</param>
/// <param name="Decision">The decision.</param>
public sealed record LimitDecision(
    Quantity Quantity,
    double? RatedLoadOhm,
    double Value,
    double ExpandedUncertainty,
    double? Min,
    double? Max,
    double GuardFactor,
    double GuardBand,
    double ConformityProbability,
    Decision Decision);
