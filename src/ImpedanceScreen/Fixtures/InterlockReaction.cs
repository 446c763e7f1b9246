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
/// <param name="AllOpen">
/// Writes of all coils, one for each run without a gap, and their read-backs, unit after unit.
/// </param>
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
            TimeSpan[] writes = [.. Spans(coilsOf[unit.Name], gapMost: 0).Select(span => time.WriteCoils(span.Count))];
            TimeSpan[] readBacks = Reads(coilsOf[unit.Name], time);
            TimeSpan[] reads = Reads(contactsOf[unit.Name], time);
            waiting = writes.Concat(readBacks).Concat(reads).Append(waiting).Max();
            allOpen += Sum(writes) + Sum(readBacks);
            bool polled = unit.Name == inputs.Interlock.Unit || unit.Name == inputs.BoardPresent?.Unit;
            reading += polled ? Sum(reads) : TimeSpan.Zero;
        }

        return new(inputs.Poll, waiting, reading, allOpen);
    }

    private static TimeSpan[] Reads(IEnumerable<int> addresses, ExchangeTime time) =>
        [.. Spans(addresses, AddressSpan.ReadGapMost).Select(span => time.ReadBits(span.Count))];

    // As the bench sends them: see where it opens all relays and where it reads inputs.
    private static IReadOnlyList<AddressSpan> Spans(IEnumerable<int> addresses, int gapMost) =>
        AddressSpan.Cover(addresses.Select(address => (ushort)address), gapMost, ExchangeTime.CoilsMost);

    private static TimeSpan Sum(IEnumerable<TimeSpan> times) =>
        times.Aggregate(TimeSpan.Zero, (sum, each) => sum + each);

    private static double Ms(TimeSpan time) => Math.Round(time.TotalMilliseconds, 1);
}
