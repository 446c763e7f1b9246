using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Instruments.Relays;

/// <summary>
/// The relays of a fixture file that a <see cref="Bench.SwitchOrder"/> may name, and what a person calls them.
/// </summary>
internal static class FixtureRelays
{
    /// <summary>All of them. Sort, busy and done coils are not among them.</summary>
    public static IReadOnlyDictionary<Relay, string> Names(FixtureFile fixture)
    {
        Dictionary<Relay, string> names = [];
        foreach ((Relay? relay, string name) in All(fixture))
        {
            if (relay is not null)
            {
                names.TryAdd(relay, $"{name} (relay unit '{relay.Unit}', coil {relay.Coil})");
            }
        }

        return names;
    }

    private static IEnumerable<(Relay? Relay, string Name)> All(FixtureFile fixture)
    {
        IEnumerable<(Relay? Relay, string Name)> loads = fixture.LoadBanks.SelectMany(bank =>
            bank.Loads.Select(load => ((Relay?)load.Relay, $"load '{load.Name}' of bank '{bank.Name}'")));
        IEnumerable<(Relay? Relay, string Name)> outputs = fixture.Outputs.SelectMany(output =>
            new (Relay?, string)[]
            {
                (output.Selector, $"selector of output '{output.Name}'"),
                (output.Sense, $"sense relay of output '{output.Name}'"),
            });
        IEnumerable<(Relay? Relay, string Name)> returns = fixture.LoadReturns.SelectMany(rail =>
            new (Relay?, string)[]
            {
                (rail.Relay, $"load return '{rail.Name}'"),
                (rail.SenseRelay, $"sense relay of load return '{rail.Name}'"),
            });
        return
        [
            .. loads, .. outputs, .. returns,
            (fixture.CommonReturn, "load return to common"),
            .. fixture.Stimuli.Select(stimulus => ((Relay?)stimulus.Relay, $"stimulus '{stimulus.Name}'")),
            (fixture.BoardSupply?.Relay, "board supply"),
        ];
    }
}
