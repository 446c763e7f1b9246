using ImpedanceScreen.Files;

namespace ImpedanceScreen.SimulatedBench.Populations;

/// <summary>The boards that a simulated bench presents, and what only a simulation has to say about the
/// bench.</summary>
/// <param name="Source">The text this was bound from.</param>
/// <param name="Product">Product, the same as in the limit file.</param>
/// <param name="Surroundings">The bench's surroundings.</param>
/// <param name="DefectiveShare">Share of boards with a defect, 0 to 1.</param>
/// <param name="Defects">The mix from which a defective board's one defect is drawn.</param>
/// <param name="Sources">Healthy sources, one an output and drive state.</param>
public sealed record Population(
    FileText Source,
    string Product,
    Surroundings Surroundings,
    double DefectiveShare,
    IReadOnlyList<DefectShare> Defects,
    IReadOnlyList<SourcePopulation> Sources);

/// <summary>The surroundings of the bench.</summary>
/// <param name="TemperatureDegC">Mean temperature beside the loads, °C.</param>
/// <param name="TemperatureSpreadDegC">Standard deviation from bench to bench, °C.</param>
/// <param name="MeterTurnaround">What a reading takes beyond its integration; not shortened by a time scale.</param>
/// <param name="HandlerTime">What the handler takes to put a board in or to take it away.</param>
public sealed record Surroundings(
    double TemperatureDegC, double TemperatureSpreadDegC, TimeSpan MeterTurnaround, TimeSpan HandlerTime);

/// <summary>How healthy boards scatter at one output in one drive state.</summary>
/// <param name="Output">Output name.</param>
/// <param name="State">Drive state name.</param>
/// <param name="VoltageMeanVolt">Mean source voltage, V.</param>
/// <param name="VoltageDeviationVolt">Standard deviation of the source voltage, V.</param>
/// <param name="ResistanceMeanOhm">Mean internal resistance, Ω.</param>
/// <param name="ResistanceDeviationOhm">Standard deviation of the internal resistance, Ω.</param>
/// <param name="CapacitanceFarad">Capacitance across the output, F.</param>
/// <param name="CurrentLimitAmpere">The output holds this current and no more, A; null where it does not limit.</param>
/// <param name="SaturationVolt">The source voltage's magnitude cannot exceed this, V; null where nothing
/// saturates.</param>
public sealed record SourcePopulation(
    string Output,
    string State,
    double VoltageMeanVolt,
    double VoltageDeviationVolt,
    double ResistanceMeanOhm,
    double ResistanceDeviationOhm,
    double CapacitanceFarad,
    double? CurrentLimitAmpere,
    double? SaturationVolt);
