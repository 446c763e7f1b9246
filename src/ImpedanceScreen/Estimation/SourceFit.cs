using System.Runtime.InteropServices;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// What a fit gives, unrounded. Resistance is all that lies ahead of the sensing point: lead included.
/// </summary>
/// <param name="SourceVoltageVolt">Vth, V.</param>
/// <param name="ResistanceOhm">Rth and, for two-wire sensing, the lead, Ω.</param>
/// <param name="VoltageVariance">Variance of Vth, V².</param>
/// <param name="ResistanceVariance">Variance of the resistance, Ω².</param>
/// <param name="Covariance">Covariance of the two, V Ω.</param>
/// <param name="ChiSquared">The minimum: squared normalised residuals, pseudo-observations included.</param>
/// <param name="DegreesOfFreedom">Load points less two.</param>
/// <param name="PValue">Probability of a chi-squared at least as large; NaN with no degree of freedom.</param>
/// <param name="Iterations">Linearisations made.</param>
/// <param name="Converged">False where the readings do not determine both values; then nothing else counts.</param>
[StructLayout(LayoutKind.Auto)]
public readonly record struct SourceFit(
    double SourceVoltageVolt,
    double ResistanceOhm,
    double VoltageVariance,
    double ResistanceVariance,
    double Covariance,
    double ChiSquared,
    int DegreesOfFreedom,
    double PValue,
    int Iterations,
    bool Converged);
