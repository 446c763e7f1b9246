using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Limits;

/// <summary>How one output is driven, loaded and judged in one drive state.</summary>
/// <param name="Name">The state's name, as <c>high</c>.</param>
/// <param name="Stimulus">Name of the fixture's stimulus that makes the state; null where the board needs none.</param>
/// <param name="Nominal">The source the output should be.</param>
/// <param name="UnloadedWindowVolt">No load closes before the unloaded reading lies in this window, V.</param>
/// <param name="LoadReturn">Name of the rail that loads return to; null for common.</param>
/// <param name="Loads">Names of the loads of the loading plan, unloaded not among them.</param>
/// <param name="Limits">The limits; at least one.</param>
/// <param name="Allowed">What the output may be asked to deliver.</param>
/// <param name="Settle">Time from the last contact at rest to the first valid reading.</param>
/// <param name="ReadingsPerLoadPoint">Readings taken at each load point, 1 to 100.</param>
public sealed record DriveState(
    string Name,
    string? Stimulus,
    NominalSource Nominal,
    Window UnloadedWindowVolt,
    string? LoadReturn,
    IReadOnlyList<string> Loads,
    IReadOnlyList<QuantityLimit> Limits,
    AllowedLoading Allowed,
    TimeSpan Settle,
    int ReadingsPerLoadPoint);

/// <summary>The source an output should be.</summary>
/// <param name="SourceVoltageVolt">Nominal Vth, V; zero and negative are ordinary.</param>
/// <param name="InternalResistanceOhm">Nominal Rth, Ω; zero or more.</param>
public sealed record NominalSource(double SourceVoltageVolt, double InternalResistanceOhm);

/// <summary>What an output may be asked to deliver. A load point beyond any of these is never switched.</summary>
/// <param name="CurrentAmpere">Largest load current, A, either direction.</param>
/// <param name="PowerWatt">Largest power the output delivers, W.</param>
/// <param name="Dwell">Longest time under load without a pause.</param>
public sealed record AllowedLoading(double CurrentAmpere, double PowerWatt, TimeSpan Dwell);
