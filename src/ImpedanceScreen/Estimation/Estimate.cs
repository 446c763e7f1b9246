namespace ImpedanceScreen.Estimation;

/// <summary>What the fit gives for one output in one drive state, rounded as recorded (9 significant digits).</summary>
/// <param name="SourceVoltageVolt">Vth, V.</param>
/// <param name="InternalResistanceOhm">Rth, Ω; may be negative within its uncertainty.</param>
/// <param name="SourceVoltageUncertaintyVolt">u(Vth), V, everything included.</param>
/// <param name="InternalResistanceUncertaintyOhm">u(Rth), Ω, everything included.</param>
/// <param name="Correlation">Correlation r of the two.</param>
/// <param name="SourceVoltageCoverage">Coverage factor k for p = 0.95 of Vth.</param>
/// <param name="InternalResistanceCoverage">Coverage factor k for p = 0.95 of Rth.</param>
/// <param name="ChiSquared">Sum of squared normalised residuals, pseudo-observations included.</param>
/// <param name="DegreesOfFreedom">Load points less two.</param>
/// <param name="PValue">Probability of a chi-squared at least as large; NaN with no degree of freedom.</param>
/// <param name="Budget">Contributions to the uncertainties, largest first, 4 significant digits.</param>
public sealed record Estimate(
    double SourceVoltageVolt,
    double InternalResistanceOhm,
    double SourceVoltageUncertaintyVolt,
    double InternalResistanceUncertaintyOhm,
    double Correlation,
    double SourceVoltageCoverage,
    double InternalResistanceCoverage,
    double ChiSquared,
    int DegreesOfFreedom,
    double PValue,
    IReadOnlyList<BudgetTerm> Budget);

/// <summary>One line of an uncertainty budget.</summary>
/// <param name="Name">Input, as <c>meter gain</c>.</param>
/// <param name="Type">Type A or B (JCGM 100:2008).</param>
/// <param name="Distribution">Its distribution.</param>
/// <param name="SourceVoltageVolt">Signed contribution to u(Vth), V.</param>
/// <param name="InternalResistanceOhm">Signed contribution to u(Rth), Ω.</param>
/// <param name="DegreesOfFreedom">Its degrees of freedom; infinite where known.</param>
public sealed record BudgetTerm(
    string Name,
    EvaluationType Type,
    InputDistribution Distribution,
    double SourceVoltageVolt,
    double InternalResistanceOhm,
    double DegreesOfFreedom);

/// <summary>How an uncertainty was evaluated (JCGM 100:2008).</summary>
public enum EvaluationType
{
    /// <summary>By statistics of repeated observations.</summary>
    A,

    /// <summary>By other knowledge.</summary>
    B,
}

/// <summary>Distribution of an input.</summary>
public enum InputDistribution
{
    /// <summary>Normal.</summary>
    Normal,

    /// <summary>Rectangular.</summary>
    Rectangular,
}
