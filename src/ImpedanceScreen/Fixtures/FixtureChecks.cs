using ImpedanceScreen.Files;

namespace ImpedanceScreen.Fixtures;

/// <summary>Checks between the parts of a fixture file; each runs only where its inputs were read well.</summary>
internal static class FixtureChecks
{
    internal static void Check(MappingReader reader, FixtureFile fixture, FixtureNames names)
    {
        CheckGroups(reader, fixture);
        CheckReturns(reader, fixture);
        CheckHandshake(reader, fixture);
        if (names.InputsReader is { } inputs
            && reader.Bound("links", "relay_units")
            && inputs.Bound("interlock", "poll_ms"))
        {
            CheckInterlock(inputs, fixture, names);
        }
    }

    /// <summary>A proof by contact needs a contact on every load that the output can meet.</summary>
    internal static void CheckProof(MappingReader reader, FixtureOutput output, FixtureNames names)
    {
        if (output.LoadCurrentProof == LoadCurrentProof.ContactReadback
            && reader.Bound("load_current_proof", "load_bank")
            && names.LoadsWithoutContact.TryGetValue(output.LoadBank, out string? loads)
            && loads.Length > 0)
        {
            reader.Mistake(
                "load_current_proof", $"no contact_input is wired on: {loads}",
                "wire and declare it on every load of the bank, or declare change-from-unloaded");
        }
    }

    /// <summary>Polls must come often enough to keep a watchdog from dropping the coils.</summary>
    internal static void CheckWatchdog(MappingReader reader, RelayUnit unit, FixtureNames names)
    {
        if (reader.Bound("watchdog_ms") && unit.WatchdogSilence <= names.Poll)
        {
            reader.Mistake(
                "watchdog_ms", "the unit would drop its coils between two polls", "make it longer than inputs.poll_ms");
        }
    }

    private static void CheckHandshake(MappingReader reader, FixtureFile fixture)
    {
        if (reader.Bound("handshake", "inputs") && fixture is { Handshake: not null, Inputs.BoardPresent: null })
        {
            reader.Mistake(
                "handshake", "without inputs.board_present nobody can tell when a sorted board has left",
                "wire the input and declare it");
        }
    }

    private static void CheckGroups(MappingReader reader, FixtureFile fixture)
    {
        if (!reader.Bound("outputs_loaded_at_once", "outputs"))
        {
            return;
        }

        int groups = fixture.Outputs.Select(output => output.Group).Distinct(StringComparer.Ordinal).Count();
        int banks = fixture.Outputs.Select(output => output.LoadBank).Distinct(StringComparer.Ordinal).Count();
        if (fixture.OutputsLoadedAtOnce > Math.Min(groups, banks))
        {
            reader.Mistake(
                "outputs_loaded_at_once",
                $"the outputs are in {groups} group(s) on {banks} load bank(s)",
                "outputs loaded at once need different groups and different load banks");
        }
    }

    // With common wired to the load bank for good, a closed rail relay would short the rail.
    private static void CheckReturns(MappingReader reader, FixtureFile fixture)
    {
        if (fixture.LoadReturns.Count > 0 && !reader.Holds("common_return"))
        {
            reader.Mistake(
                "load_returns", "with common wired for good a rail relay would short the rail",
                "put common behind a relay of its own and declare it as common_return");
        }
    }

    private static void CheckInterlock(MappingReader inputs, FixtureFile fixture, FixtureNames names)
    {
        InterlockReaction? reaction = InterlockReaction.Of(
            fixture.Links, fixture.RelayUnits, fixture.Inputs, names.Coils.Claimed, names.Inputs.Claimed);
        if (reaction?.Total > InterlockReaction.Longest)
        {
            inputs.Mistake(
                "poll_ms", $"a broken interlock may open the relays as late as {reaction}",
                "at most 100 ms: shorten poll_ms or longest_answer_ms, raise baud, or use fewer relay units");
        }
    }
}
