namespace ImpedanceScreen.Fixtures;

/// <summary>The relays of a fixture file in one list.</summary>
public static class FixtureRelays
{
    /// <summary>Every relay: load, return, selector, sense, stimulus, supply and handshake.</summary>
    public static IEnumerable<Relay> All(FixtureFile fixture)
    {
        ArgumentNullException.ThrowIfNull(fixture);
        IEnumerable<Relay?> single =
        [
            fixture.BoardSupply?.Relay, fixture.CommonReturn, fixture.Handshake?.PassBin, fixture.Handshake?.FailBin,
            fixture.Handshake?.RetestBin, fixture.Handshake?.Busy, fixture.Handshake?.Done,
        ];
        return single.OfType<Relay>()
            .Concat(fixture.LoadBanks.SelectMany(bank => bank.Loads).Select(load => load.Relay))
            .Concat(fixture.LoadReturns.SelectMany(rail => (Relay[])[rail.Relay, rail.SenseRelay]))
            .Concat(fixture.Outputs.SelectMany(output => (Relay[])[output.Selector, output.Sense]))
            .Concat(fixture.Stimuli.Select(stimulus => stimulus.Relay));
    }
}
