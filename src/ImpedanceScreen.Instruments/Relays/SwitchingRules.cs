using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Instruments.Relays;

/// <summary>
/// What may be closed together, whatever the loading plan says. No parallel combination of loads can be declared, so
/// two loads of a bank are never closed.
/// </summary>
internal sealed class SwitchingRules(FixtureFile fixture)
{
    /// <summary>Why these relays may not be closed together; null where they may.</summary>
    public string? Broken(IReadOnlySet<Relay> closed) =>
        BrokenInBanks(closed) ?? BrokenBetweenOutputs(closed) ?? BrokenAtMeters(closed) ?? BrokenAtReturns(closed);

    private static string? OneAtMost(IEnumerable<string> closed, string what)
    {
        string[] names = [.. closed];
        return names.Length > 1 ? $"{what}: {string.Join(", ", names.Select(name => $"'{name}'"))}" : null;
    }

    private string? BrokenInBanks(IReadOnlySet<Relay> closed)
    {
        foreach (LoadBank bank in fixture.LoadBanks)
        {
            string[] loads = [.. bank.Loads.Where(load => closed.Contains(load.Relay)).Select(load => load.Name)];
            string[] outputs = [.. Selected(bank, closed).Select(output => output.Name)];
            string? broken = OneAtMost(loads, $"two loads of bank '{bank.Name}' would be closed")
                ?? OneAtMost(outputs, $"two outputs would be connected to each other through bank '{bank.Name}'");
            if (broken is null && loads.Length > 0 && outputs.Length == 0)
            {
                broken = $"load '{loads[0]}' of bank '{bank.Name}' would be closed without the selector of an output";
            }

            if (broken is not null)
            {
                return broken;
            }
        }

        return null;
    }

    private string? BrokenBetweenOutputs(IReadOnlySet<Relay> closed)
    {
        FixtureOutput[] loaded =
        [
            .. fixture.LoadBanks
                .Where(bank => bank.Loads.Any(load => closed.Contains(load.Relay)))
                .SelectMany(bank => Selected(bank, closed)),
        ];
        if (loaded.Length > fixture.OutputsLoadedAtOnce)
        {
            return $"{loaded.Length} outputs would be loaded at once where {fixture.OutputsLoadedAtOnce} may be";
        }

        return loaded.GroupBy(output => output.Group)
            .Select(group => OneAtMost(
                group.Select(output => output.Name), $"two outputs of group '{group.Key}' would be loaded at once"))
            .FirstOrDefault(broken => broken is not null);
    }

    private string? BrokenAtMeters(IReadOnlySet<Relay> closed) => fixture.Meters
        .Select(meter => OneAtMost(
            fixture.Outputs
                .Where(output => output.Meter == meter.Name && closed.Contains(output.Sense))
                .Select(output => output.Name)
                .Concat(fixture.LoadReturns
                    .Where(rail => rail.Meter == meter.Name && closed.Contains(rail.SenseRelay))
                    .Select(rail => rail.Name)),
            $"meter '{meter.Name}' would be connected to two points"))
        .FirstOrDefault(broken => broken is not null);

    private string? BrokenAtReturns(IReadOnlySet<Relay> closed) => OneAtMost(
        fixture.LoadReturns
            .Where(rail => closed.Contains(rail.Relay))
            .Select(rail => rail.Name)
            .Concat(fixture.CommonReturn is { } common && closed.Contains(common) ? ["common"] : []),
        "two load returns would be connected to each other");

    private IEnumerable<FixtureOutput> Selected(LoadBank bank, IReadOnlySet<Relay> closed) =>
        fixture.Outputs.Where(output => output.LoadBank == bank.Name && closed.Contains(output.Selector));
}
