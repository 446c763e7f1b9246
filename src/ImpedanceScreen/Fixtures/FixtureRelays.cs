namespace ImpedanceScreen.Fixtures;

/// <summary>The relays of a fixture file in one list, each with what a person calls it.</summary>
public static class FixtureRelays
{
    /// <summary>Every relay whose contact lies in the measuring circuit, by what a person calls it.</summary>
    public static IReadOnlyDictionary<Relay, string> Names(FixtureFile fixture)
    {
        Dictionary<Relay, string> names = [];
        foreach ((Relay relay, string name) in Named(fixture))
        {
            names.TryAdd(relay, $"{name} (relay unit '{relay.Unit}', coil {relay.Coil})");
        }

        return names;
    }

    /// <summary>
    /// Every relay whose contact lies in the measuring circuit: load, return, selector, sense, stimulus, supply.
    /// </summary>
    public static IEnumerable<Relay> Switching(FixtureFile fixture) => Named(fixture).Select(named => named.Relay);

    /// <summary>Relays that only tell the handler something: bins, busy, done.</summary>
    public static IEnumerable<Relay> Handshaking(FixtureFile fixture)
    {
        ArgumentNullException.ThrowIfNull(fixture);
        Relay?[] all =
        [
            fixture.Handshake?.PassBin, fixture.Handshake?.FailBin, fixture.Handshake?.RetestBin,
            fixture.Handshake?.Busy, fixture.Handshake?.Done,
        ];
        return all.OfType<Relay>();
    }

    /// <summary>Every relay.</summary>
    public static IEnumerable<Relay> All(FixtureFile fixture) => Switching(fixture).Concat(Handshaking(fixture));

    private static IEnumerable<(Relay Relay, string Name)> Named(FixtureFile fixture)
    {
        ArgumentNullException.ThrowIfNull(fixture);
        foreach (LoadBank bank in fixture.LoadBanks)
        {
            foreach (Load load in bank.Loads)
            {
                yield return (load.Relay, $"load '{load.Name}' of bank '{bank.Name}'");
            }
        }

        foreach (FixtureOutput output in fixture.Outputs)
        {
            yield return (output.Selector, $"selector of output '{output.Name}'");
            yield return (output.Sense, $"sense relay of output '{output.Name}'");
        }

        foreach (LoadReturn rail in fixture.LoadReturns)
        {
            yield return (rail.Relay, $"load return '{rail.Name}'");
            yield return (rail.SenseRelay, $"sense relay of load return '{rail.Name}'");
        }

        foreach (Stimulus stimulus in fixture.Stimuli)
        {
            yield return (stimulus.Relay, $"stimulus '{stimulus.Name}'");
        }

        if (fixture.CommonReturn is { } common)
        {
            yield return (common, "load return to common");
        }

        if (fixture.BoardSupply is { } supply)
        {
            yield return (supply.Relay, "board supply");
        }
    }
}
