using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Fixtures;

/// <summary>A set of calibrated loads.</summary>
/// <param name="Name">The bank's name.</param>
/// <param name="Loads">Its loads.</param>
public sealed record LoadBank(string Name, IReadOnlyList<Load> Loads);

/// <summary>A calibrated resistor behind a normally-open relay.</summary>
/// <param name="Name">The load's name.</param>
/// <param name="Relay">Its relay.</param>
/// <param name="ResistanceOhm">Calibrated value, Ω, at the calibration temperature.</param>
/// <param name="ExpandedUncertaintyOhm">Expanded uncertainty of the certificate, Ω.</param>
/// <param name="CoverageFactor">Coverage factor k of the certificate.</param>
/// <param name="CommonUncertaintyOhm">
/// Standard uncertainty shared with the other loads of the same certificate, Ω; null where not stated, then all of it
/// counts as common (correlation 1).
/// </param>
/// <param name="Certificate">Certificate number.</param>
/// <param name="CalibratedOn">Calibration date.</param>
/// <param name="DueOn">Date until which the calibration is valid.</param>
/// <param name="TemperatureCoefficientPerKelvin">Relative change a kelvin, 1/K.</param>
/// <param name="CalibrationTemperatureDegC">Temperature of the calibration, °C.</param>
/// <param name="SelfHeatingPerWatt">Relative change a watt of dissipation, 1/W.</param>
/// <param name="PowerRatingWatt">Power rating after derating, W.</param>
/// <param name="BranchOhm">Branch resistance of this load's path, Ω, with standard uncertainty.</param>
public sealed record Load(
    string Name,
    Relay Relay,
    double ResistanceOhm,
    double ExpandedUncertaintyOhm,
    double CoverageFactor,
    double? CommonUncertaintyOhm,
    string Certificate,
    DateOnly CalibratedOn,
    DateOnly DueOn,
    double TemperatureCoefficientPerKelvin,
    double CalibrationTemperatureDegC,
    double SelfHeatingPerWatt,
    double PowerRatingWatt,
    Uncertain BranchOhm)
{
    /// <summary>Standard uncertainty of the certificate, Ω.</summary>
    public double StandardUncertaintyOhm => ExpandedUncertaintyOhm / CoverageFactor;
}
