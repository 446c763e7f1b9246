namespace ImpedanceScreen.SimulatedBench.Populations;

/// <summary>A simulated board: what is really behind its outputs.</summary>
/// <param name="Ordinal">Number in the order of presentation, from 1.</param>
/// <param name="Label">Serial number on its label.</param>
/// <param name="Sources">The truth, one an output and drive state.</param>
public sealed record SimulatedBoard(long Ordinal, string Label, IReadOnlyList<TrueSource> Sources)
{
    /// <summary>The source behind an output in a state.</summary>
    public TrueSource Source(string output, string state) =>
        Sources.First(source => source.Output == output && source.State == state);
}

/// <summary>The true source behind one output in one drive state.</summary>
/// <param name="Output">Output name.</param>
/// <param name="State">Drive state name.</param>
/// <param name="VoltageVolt">True source voltage, V.</param>
/// <param name="ResistanceOhm">True internal resistance, Ω.</param>
/// <param name="CapacitanceFarad">Capacitance across the output, F.</param>
/// <param name="CurrentLimitAmpere">Knee of the current limit, A; null where it does not limit.</param>
/// <param name="NoiseVolt">Standard deviation of its own scatter from reading to reading, V.</param>
/// <param name="Defect">What is wrong with it; null for nothing.</param>
public sealed record TrueSource(
    string Output,
    string State,
    double VoltageVolt,
    double ResistanceOhm,
    double CapacitanceFarad,
    double? CurrentLimitAmpere,
    double NoiseVolt,
    DefectKind? Defect);
