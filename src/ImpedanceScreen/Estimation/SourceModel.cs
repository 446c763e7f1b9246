using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// The reading that a Thevenin source gives at one load point, with its sensitivities:
/// <c>V = (Vth + R Vret G) / (1 + R (G + Gm))</c>.
/// </summary>
[StructLayout(LayoutKind.Auto)]
internal readonly struct SourceModel
{
    private readonly double resistance;
    private readonly double load;
    private readonly double meter;
    private readonly double back;
    private readonly double inverse;

    /// <summary>Evaluates the model.</summary>
    /// <param name="sourceVolt">Vth, V.</param>
    /// <param name="ohm">All resistance ahead of the sensing point, Ω.</param>
    /// <param name="returnVolt">Voltage that the load returns to, V.</param>
    /// <param name="loadSiemens">Conductance of the load's path, S; 0 for unloaded.</param>
    /// <param name="meterSiemens">The meter's input conductance, S.</param>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public SourceModel(double sourceVolt, double ohm, double returnVolt, double loadSiemens, double meterSiemens)
    {
        resistance = ohm;
        load = loadSiemens;
        meter = meterSiemens;
        back = returnVolt;
        double divider = 1 + (ohm * (loadSiemens + meterSiemens));
        IsPhysical = divider > 0;
        inverse = 1 / divider;
        Volt = (sourceVolt + (ohm * returnVolt * loadSiemens)) * inverse;
    }

    /// <summary>False where the divider is zero or negative: no reading belongs to such a source.</summary>
    public bool IsPhysical { get; }

    /// <summary>The reading, V.</summary>
    public double Volt { get; }

    /// <summary>dV/dVth.</summary>
    public double PerSourceVolt => inverse;

    /// <summary>dV/dR, A.</summary>
    public double PerOhm => ((back * load) - (Volt * (load + meter))) * inverse;

    /// <summary>dV/d(load path), A.</summary>
    public double PerLoadOhm => resistance * (Volt - back) * load * load * inverse;

    /// <summary>dV/dVret.</summary>
    public double PerReturnVolt => resistance * load * inverse;

    /// <summary>dV/dGm, V Ω.</summary>
    public double PerMeterSiemens => -resistance * Volt * inverse;
}
