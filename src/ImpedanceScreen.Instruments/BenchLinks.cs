using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Instruments;

/// <summary>Which instrument is on which link.</summary>
internal static class BenchLinks
{
    /// <summary>Relay units may share a link, since frames name their unit; a meter has a link of its own.</summary>
    /// <exception cref="ArgumentException">A link is missing or shared.</exception>
    public static void Check(FixtureFile fixture)
    {
        HashSet<string> known = [.. fixture.Links.Select(link => link.Name)];
        string? missing = fixture.RelayUnits.Select(unit => unit.Link)
            .Concat(fixture.Meters.Select(meter => meter.Link))
            .FirstOrDefault(link => !known.Contains(link));
        if (missing is not null)
        {
            throw new ArgumentException($"The fixture file has no link '{missing}'.", nameof(fixture));
        }

        HashSet<string> taken = [.. fixture.RelayUnits.Select(unit => unit.Link)];
        Meter? sharing = fixture.Meters.FirstOrDefault(meter => !taken.Add(meter.Link));
        if (sharing is not null)
        {
            throw new ArgumentException(
                $"Meter '{sharing.Name}' shares link '{sharing.Link}' with another instrument; "
                + "a meter needs a link of its own.",
                nameof(fixture));
        }
    }

    /// <summary>Longest answer of each unit address on one link.</summary>
    public static Func<byte, TimeSpan> LongestAnswers(IReadOnlyList<RelayUnit> units)
    {
        Dictionary<byte, TimeSpan> longest = units.GroupBy(unit => unit.UnitAddress)
            .ToDictionary(group => group.Key, group => group.Max(unit => unit.LongestAnswer));
        return unit => longest[unit];
    }
}
