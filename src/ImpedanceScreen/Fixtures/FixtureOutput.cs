using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Fixtures;

/// <summary>How one output reaches its load bank and its meter.</summary>
/// <param name="Name">The output's name, the same in the limit file.</param>
/// <param name="Selector">The relay that connects the output to its load bank.</param>
/// <param name="Sense">The relay that connects the output to its meter.</param>
/// <param name="Meter">Name of its meter.</param>
/// <param name="LoadBank">Name of its load bank.</param>
/// <param name="Group">Outputs of one group share return and supply: no two of them are loaded at once.</param>
/// <param name="Sensing">Where the meter senses.</param>
/// <param name="LeadOhm">Lead resistance, both conductors, Ω, contact variation within its standard
/// uncertainty.</param>
/// <param name="LoadCurrentProof">What proves that load current flows.</param>
public sealed record FixtureOutput(
    string Name,
    Relay Selector,
    Relay Sense,
    string Meter,
    string LoadBank,
    string Group,
    Sensing Sensing,
    Uncertain LeadOhm,
    LoadCurrentProof LoadCurrentProof);

/// <summary>Where the meter senses.</summary>
public enum Sensing
{
    /// <summary>At the fixture end of the leads that also carry load current: the lead adds to Rth.</summary>
    TwoWire,

    /// <summary>At the board's own terminals by separate sense leads: the lead adds to the load.</summary>
    Terminal,
}

/// <summary>What proves that load current flows at a load point.</summary>
public enum LoadCurrentProof
{
    /// <summary>A change from the unloaded reading larger than its uncertainty, and nothing else.</summary>
    ChangeFromUnloaded,

    /// <summary>The load relay's mirror contact reads closed.</summary>
    ContactReadback,
}

/// <summary>A relay that drives outputs into a state.</summary>
/// <param name="Name">The stimulus's name.</param>
/// <param name="Relay">The relay that applies it.</param>
public sealed record Stimulus(string Name, Relay Relay);
