using ImpedanceScreen.Files;

namespace ImpedanceScreen.Fixtures;

/// <summary>A bench as its fixture file describes it: links, relay units, loads, meters, inputs.</summary>
/// <param name="Source">The text this was bound from.</param>
/// <param name="Name">The fixture's name.</param>
/// <param name="Revision">Its revision; text, never a number.</param>
/// <param name="Links">All links to instruments.</param>
/// <param name="RelayUnits">The addressable Modbus devices.</param>
/// <param name="BoardSupply">The board's supply; null where boards are powered otherwise or not at all.</param>
/// <param name="LoadReturns">Rails that loads can return to besides common.</param>
/// <param name="CommonReturn">Relay that returns a load bank to common; null where common is wired.</param>
/// <param name="LoadBanks">The load banks.</param>
/// <param name="Stimuli">What drives outputs into states.</param>
/// <param name="Outputs">How each output reaches its load bank and its meter.</param>
/// <param name="OutputsLoadedAtOnce">How many outputs may be loaded at once, 1 or more.</param>
/// <param name="Meters">The meters.</param>
/// <param name="TemperatureSensor">The sensor beside the loads; null where there is none.</param>
/// <param name="Inputs">Discrete inputs.</param>
/// <param name="Handshake">Sort bins, busy and done; null for a bench where a person takes the board.</param>
public sealed record FixtureFile(
    FileText Source,
    string Name,
    string Revision,
    IReadOnlyList<Link> Links,
    IReadOnlyList<RelayUnit> RelayUnits,
    BoardSupply? BoardSupply,
    IReadOnlyList<LoadReturn> LoadReturns,
    Relay? CommonReturn,
    IReadOnlyList<LoadBank> LoadBanks,
    IReadOnlyList<Stimulus> Stimuli,
    IReadOnlyList<FixtureOutput> Outputs,
    int OutputsLoadedAtOnce,
    IReadOnlyList<Meter> Meters,
    TemperatureSensor? TemperatureSensor,
    BenchInputs Inputs,
    Handshake? Handshake);
