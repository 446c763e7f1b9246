using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Fixtures;

/// <summary>A named rail that loads can return to.</summary>
/// <param name="Name">The rail's name.</param>
/// <param name="Relay">The relay that connects the load bank's far end to the rail.</param>
/// <param name="SenseRelay">The relay that lets the meter read the rail.</param>
/// <param name="Meter">Name of the meter that reads it.</param>
/// <param name="VoltageVolt">Stated voltage, V, with standard uncertainty; readings replace it in the estimate.</param>
/// <param name="CurrentLimitAmpere">What the rail can supply or take, A.</param>
public sealed record LoadReturn(
    string Name, Relay Relay, Relay SenseRelay, string Meter, Uncertain VoltageVolt, double CurrentLimitAmpere);
