using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Timing;

namespace ImpedanceScreen.Instruments.Relays;

/// <summary>
/// The relays of a fixture, break before make. From the moment a switching begins until its coils are confirmed the
/// relays are
/// <em>doubtful</em>, and stay so where it fails or is cancelled: then only opening all of them is accepted.
/// </summary>
internal sealed class RelayFixture
{
    private readonly IReadOnlyDictionary<Relay, string> names;
    private readonly IReadOnlyDictionary<string, UnitRelays> units;
    private readonly SwitchingRules rules;
    private readonly AllOpen allOpen;
    private readonly TimeProvider time;
    private readonly double timeScale;
    private Deadline contactsOpen;

    public RelayFixture(
        FixtureFile fixture, IReadOnlyDictionary<string, FixtureUnit> fixtureUnits, TimeProvider time, double timeScale)
    {
        this.time = time;
        this.timeScale = timeScale;
        names = FixtureRelays.Names(fixture);
        units = names.GroupBy(pair => pair.Key.Unit).ToDictionary(
            group => group.Key,
            group => new UnitRelays(fixtureUnits[group.Key], group.ToDictionary(pair => pair.Key, pair => pair.Value)));
        rules = new SwitchingRules(fixture);
        allOpen = new AllOpen(units.Values, names, time, timeScale);
        contactsOpen = Deadline.In(time, TimeSpan.Zero);
    }

    /// <summary>Whether what the relays do is not known. True until all were proved open once.</summary>
    public bool IsDoubtful { get; private set; } = true;

    public async Task<Switched> SwitchAsync(
        SwitchOrder order, Func<CancellationToken, Task> between, CancellationToken cancellation)
    {
        cancellation.ThrowIfCancellationRequested();
        HashSet<Relay> closed = [.. Closed()];
        Relay[] opening = [.. order.Open.Distinct().Where(closed.Contains)];
        Relay[] closing = [.. order.Close.Distinct().Where(relay => !closed.Contains(relay))];
        closed.ExceptWith(opening);
        closed.UnionWith(closing);
        ThrowIfRefused(order, closed);

        IsDoubtful = true;
        long acknowledged = time.GetTimestamp();
        TimeSpan contactTime = TimeSpan.Zero;
        if (opening.Length > 0)
        {
            acknowledged = await CommandAsync(opening, close: false, between, cancellation);
            contactTime = Longest(opening, unit => unit.Release);
            contactsOpen = Deadline.After(time, acknowledged, contactTime);
        }

        if (closing.Length > 0)
        {
            await ConfirmAsync(opening, between, cancellation);

            // Also what an earlier order opened may still be on its way.
            await contactsOpen.WaitAsync(cancellation);
            acknowledged = await CommandAsync(closing, close: true, between, cancellation);
            contactTime = Longest(closing, unit => unit.Operate);
        }

        await ConfirmAsync(closing.Length > 0 ? closing : order.Open.Concat(order.Close), between, cancellation);
        IsDoubtful = false;
        return new Switched(acknowledged, contactTime);
    }

    public async Task<ContactCheck> CheckContactsAsync(
        Func<CancellationToken, Task> between, CancellationToken cancellation)
    {
        List<Relay> proved = [];
        List<Relay> notClosed = [];
        List<Relay> notOpen = [];
        foreach (UnitRelays unit in units.Values)
        {
            foreach ((Relay relay, bool commanded, bool contact) in await unit.ReadContactsAsync(between, cancellation))
            {
                List<Relay>? list = (commanded, contact) switch
                {
                    (true, true) => proved,
                    (true, false) => notClosed,
                    (false, true) => notOpen,
                    _ => null,
                };
                list?.Add(relay);
            }
        }

        return new ContactCheck(proved, notClosed, notOpen);
    }

    /// <summary>Opens all relays; takes no token and never throws for a bench that does not answer.</summary>
    public async Task<AllOpenOutcome> OpenAllAsync()
    {
        IsDoubtful = true;
        AllOpenOutcome outcome = await allOpen.RunAsync();
        contactsOpen = Deadline.In(time, Longest(names.Keys, unit => unit.Release));
        IsDoubtful = !outcome.Confirmed;
        return outcome;
    }

    /// <summary>
    /// Reads the coils of units whose watchdog has not heard from this program for a third of its time: keeps it quiet,
    /// and
    /// notices coils that it has dropped already.
    /// </summary>
    public async Task KeepAliveAsync(CancellationToken cancellation)
    {
        foreach (UnitRelays unit in units.Values)
        {
            if (!IsDoubtful && unit.Unit.NeedsWord)
            {
                await unit.ConfirmAsync(FixtureUnit.NothingBetween, cancellation);
            }
        }
    }

    private void ThrowIfRefused(SwitchOrder order, HashSet<Relay> closedAfterwards)
    {
        Relay? foreign = order.Open.Concat(order.Close).FirstOrDefault(relay => !names.ContainsKey(relay));
        Relay? both = order.Open.FirstOrDefault(order.Close.Contains);
        string? why = foreign is not null
            ? $"coil {foreign.Coil} of relay unit '{foreign.Unit}' is no relay that the bench switches"
            : both is not null ? $"{names[both]} is to be opened and closed at once"
            : IsDoubtful ? "what the relays do is not known; open all of them first"
            : rules.Broken(closedAfterwards);
        if (why is not null)
        {
            throw Refused(why);
        }
    }

    private static BenchFaultException Refused(string why) =>
        new(BenchFault.OrderRefused, $"The switching order is refused: {why}.");

    private IEnumerable<Relay> Closed() => units.Values.SelectMany(unit => unit.Closed);

    private async Task<long> CommandAsync(
        Relay[] relays, bool close, Func<CancellationToken, Task> between, CancellationToken cancellation)
    {
        // The order was judged as a whole; here once more with what is commanded by now, just before contacts close.
        if (close && rules.Broken(Closed().Concat(relays).ToHashSet()) is { } why)
        {
            throw Refused(why);
        }

        foreach (IGrouping<string, Relay> ofUnit in relays.GroupBy(relay => relay.Unit))
        {
            await units[ofUnit.Key].CommandAsync(ofUnit, close, between, cancellation);
        }

        return time.GetTimestamp();
    }

    private async Task ConfirmAsync(
        IEnumerable<Relay> relays, Func<CancellationToken, Task> between, CancellationToken cancellation)
    {
        foreach (string unit in relays.Select(relay => relay.Unit).Distinct())
        {
            await units[unit].ConfirmAsync(between, cancellation);
        }
    }

    private TimeSpan Longest(IEnumerable<Relay> relays, Func<RelayUnit, TimeSpan> span) =>
        relays.Select(relay => span(units[relay.Unit].Unit.Unit)).DefaultIfEmpty().Max() * timeScale;
}
