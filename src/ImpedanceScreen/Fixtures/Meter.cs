namespace ImpedanceScreen.Fixtures;

/// <summary>A SCPI voltmeter.</summary>
/// <param name="Name">The meter's name in the file.</param>
/// <param name="Link">Name of its link.</param>
/// <param name="Identity">The exact answer to <c>*IDN?</c> (IEEE 488.2) that the calibrated meter gives.</param>
/// <param name="Integration">Integration time of one reading.</param>
/// <param name="PowerLineCycles">The same in power-line cycles, as set at the meter.</param>
/// <param name="Certificate">Certificate number.</param>
/// <param name="CalibratedOn">Calibration date.</param>
/// <param name="DueOn">Date until which the calibration is valid.</param>
/// <param name="Ranges">Its DC-volts ranges in ascending order.</param>
public sealed record Meter(
    string Name,
    string Link,
    string Identity,
    TimeSpan Integration,
    double PowerLineCycles,
    string Certificate,
    DateOnly CalibratedOn,
    DateOnly DueOn,
    IReadOnlyList<MeterRange> Ranges);

/// <summary>One DC-volts range of a meter at its integration time.</summary>
/// <param name="FullScaleVolt">Full scale, V.</param>
/// <param name="GainLimit">Accuracy, part of reading (25 ppm is 25e-6): half width of a rectangular
/// distribution.</param>
/// <param name="OffsetLimitVolt">Accuracy, part of range, V: half width of a rectangular distribution, common to all
/// readings of the range.</param>
/// <param name="NoiseVolt">Pooled standard deviation of one reading, V.</param>
/// <param name="NoiseDegreesOfFreedom">Degrees of freedom of that pooled value, at least 50.</param>
/// <param name="ResolutionVolt">Smallest step, V.</param>
/// <param name="InputOhm">Input resistance, Ω; infinity where the file says so.</param>
/// <param name="InputLimit">Relative half width of the input resistance's rectangular distribution.</param>
public sealed record MeterRange(
    double FullScaleVolt,
    double GainLimit,
    double OffsetLimitVolt,
    double NoiseVolt,
    int NoiseDegreesOfFreedom,
    double ResolutionVolt,
    double InputOhm,
    double InputLimit);
