using System.Runtime.InteropServices;

namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>
/// An output as its sensed point shows it: a source, the meter's conductance, and what lies in series towards the
/// load bank.
/// </summary>
/// <param name="SourceVolt">Source voltage, V.</param>
/// <param name="SourceOhm">Resistance ahead of the sensed point, Ω; infinity where there is no board.</param>
/// <param name="SeriesOhm">Resistance from the sensed point to the load bank, Ω.</param>
/// <param name="MeterSiemens">Conductance of the meter at the sensed point, S.</param>
/// <param name="LimitAmpere">The source holds this current and no more, A; infinity where it does not limit.</param>
[StructLayout(LayoutKind.Auto)]
internal readonly record struct Port(
    double SourceVolt, double SourceOhm, double SeriesOhm, double MeterSiemens, double LimitAmpere)
{
    /// <summary>Source voltage with the meter connected (Thévenin), V.</summary>
    public double MeteredVolt => double.IsPositiveInfinity(SourceOhm) ? 0.0 : SourceVolt / (1.0 + (SourceOhm * MeterSiemens));

    /// <summary>Conductance of the sensed point to source and meter, S.</summary>
    public double PointSiemens => (1.0 / SourceOhm) + MeterSiemens;

    /// <summary>Conductance that the load bank sees, S.</summary>
    public double BusSiemens => PointSiemens == 0.0 ? 0.0 : 1.0 / ((1.0 / PointSiemens) + SeriesOhm);

    /// <summary>The same port where the source holds its current instead: only the meter conducts.</summary>
    public Port Limited => this with { SourceOhm = double.PositiveInfinity };
}
