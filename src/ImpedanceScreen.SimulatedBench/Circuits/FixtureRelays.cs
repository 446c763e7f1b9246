using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>The relays of a fixture file.</summary>
internal static class FixtureRelays
{
    /// <summary>Relays whose contacts lie in the measuring circuit.</summary>
    public static IEnumerable<Relay> Switching(FixtureFile fixture)
    {
        IEnumerable<Relay> all = fixture.LoadBanks.SelectMany(bank => bank.Loads, (_, load) => load.Relay)
            .Concat(fixture.Outputs.SelectMany(output => new[] { output.Selector, output.Sense }))
            .Concat(fixture.LoadReturns.SelectMany(rail => new[] { rail.Relay, rail.SenseRelay }))
            .Concat(fixture.Stimuli.Select(stimulus => stimulus.Relay));
        all = fixture.CommonReturn is { } common ? all.Append(common) : all;
        return fixture.BoardSupply is { } supply ? all.Append(supply.Relay) : all;
    }

    /// <summary>Relays that only tell the handler something.</summary>
    public static IEnumerable<Relay> Handshaking(FixtureFile fixture)
    {
        if (fixture.Handshake is not { } handshake)
        {
            return [];
        }

        Relay[] always = [handshake.PassBin, handshake.FailBin, handshake.Busy, handshake.Done];
        return handshake.RetestBin is { } retest ? [.. always, retest] : always;
    }
}
