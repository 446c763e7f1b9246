using System.Globalization;

namespace ImpedanceScreen.Fixtures;

/// <summary>
/// Longest time from a broken interlock to confirmed open relays as far as the program is concerned; the interlock
/// contact itself cuts the coils' supply in hardware, long before. After a link time-out the relay units' own watchdog
/// is what opens them: that case is not in this sum.
/// </summary>
/// <param name="Poll">The contact may open right after it was read: one whole poll period passes.</param>
/// <param name="Waiting">The longest exchange of any relay unit may just have begun when the next poll is due.</param>
/// <param name="Reading">The poll's own exchange, one for each unit that has an input.</param>
/// <param name="AllOpen">One write of all coils and one read-back for each relay unit, one after another.</param>
public sealed record InterlockReaction(TimeSpan Poll, TimeSpan Waiting, TimeSpan Reading, TimeSpan AllOpen)
{
    /// <summary>The longest time that a fixture file may have.</summary>
    public static TimeSpan Longest { get; } = TimeSpan.FromMilliseconds(100);

    /// <summary>The sum of the parts.</summary>
    public TimeSpan Total => Poll + Waiting + Reading + AllOpen;

    /// <summary>Computes the time for a fixture file that was bound.</summary>
    public static InterlockReaction WorstCase(FixtureFile fixture)
    {
        ArgumentNullException.ThrowIfNull(fixture);
        List<Relay> relays = [.. FixtureRelays.All(fixture)];
        IEnumerable<InputPoint?> points = [fixture.Inputs.BoardPresent, fixture.Inputs.Interlock];
        return Of(
            fixture.Links,
            fixture.RelayUnits,
            fixture.Inputs,
            relays.Select(relay => (relay.Unit, (int)relay.Coil)),
            relays.Where(relay => relay.ContactInput is not null)
                .Select(relay => (relay.Unit, (int)relay.ContactInput!))
                .Concat(points.OfType<InputPoint>().Select(point => (point.Unit, (int)point.Address))))!;
    }

    /// <summary>The parts in milliseconds, for a person.</summary>
    public override string ToString() => string.Create(
        CultureInfo.InvariantCulture,
        $"{Ms(Total)} ms (poll period {Ms(Poll)} + exchange under way {Ms(Waiting)} "
        + $"+ reading inputs {Ms(Reading)} + opening all {Ms(AllOpen)})");

    /// <summary>The time from the parts of a file; null where a part is missing.</summary>
    internal static InterlockReaction? Of(
        IReadOnlyList<Link> links,
        IReadOnlyList<RelayUnit> units,
        BenchInputs inputs,
        IEnumerable<(string Unit, int Address)> coils,
        IEnumerable<(string Unit, int Address)> contacts)
    {
        ILookup<string, int> coilsOf = coils.ToLookup(coil => coil.Unit, coil => coil.Address, StringComparer.Ordinal);
        ILookup<string, int> contactsOf = contacts.ToLookup(c => c.Unit, c => c.Address, StringComparer.Ordinal);
        TimeSpan waiting = TimeSpan.Zero;
        TimeSpan reading = TimeSpan.Zero;
        TimeSpan allOpen = TimeSpan.Zero;
        foreach (RelayUnit unit in units)
        {
            if (links.FirstOrDefault(link => link.Name == unit.Link) is not { } link)
            {
                return null;
            }

            ExchangeTime time = new(link, unit.LongestAnswer);
            (int coilSpan, int inputSpan) = (Span(coilsOf[unit.Name]), Span(contactsOf[unit.Name]));
            (TimeSpan write, TimeSpan readBack, TimeSpan read) =
                (time.WriteCoils(coilSpan), time.ReadBits(coilSpan), time.ReadBits(inputSpan));
            waiting = Max(waiting, Max(write, Max(readBack, read)));
            allOpen += write + readBack;
            bool polled = unit.Name == inputs.Interlock.Unit || unit.Name == inputs.BoardPresent?.Unit;
            reading += polled ? read : TimeSpan.Zero;
        }

        return new(inputs.Poll, waiting, reading, allOpen);
    }

    private static int Span(IEnumerable<int> addresses)
    {
        List<int> all = [.. addresses];
        return all.Count == 0 ? 1 : all.Max() - all.Min() + 1;
    }

    private static TimeSpan Max(TimeSpan one, TimeSpan other) => one > other ? one : other;

    private static double Ms(TimeSpan time) => Math.Round(time.TotalMilliseconds, 1);
}
