using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Screening.Watching;
using ImpedanceScreen.Timing;

namespace ImpedanceScreen.Screening.Attempts;

/// <summary>
/// Carries out load points: switches for one lane, senses it, reads it. Relay work of one lane may run while the
/// meter reads another.
/// </summary>
internal sealed class LoadPointRunner(
    IBench bench, ScreeningJob job, BenchWatch watch, TimeLedger ledger, TimeProvider time, double timeScale)
{
    // Which sense relay is closed at each meter: a meter sees one output at a time.
    private readonly Dictionary<string, Relay> sensed = [];
    private readonly HashSet<Relay> loadRelays =
        [.. job.Fixture.LoadBanks.SelectMany(bank => bank.Loads, (_, load) => load.Relay)];

    // Where the far ends of the loads go: the same for all lanes of a wave, so that no lane opens it for another.
    private Relay? loadReturn;

    /// <summary>No reading is valid before this moment: the board warms up.</summary>
    public Deadline WarmedUp { get; set; } = Deadline.In(time, TimeSpan.Zero);

    /// <summary>Connects a lane's present state to its load bank; the load stays open.</summary>
    public async Task ConnectAsync(Lane lane, CancellationToken cancellation)
    {
        StateJob state = lane.State!;
        List<Relay> path = [state.Output.Selector];
        if (state.Stimulus is { } stimulus)
        {
            path.Add(stimulus.Relay);
        }

        List<Relay> open = [.. lane.Path.Except(path)];
        List<Relay> close = [.. path.Except(lane.Path)];
        if (lane.Closed is { } closed)
        {
            open.Add(closed.Relay);
        }

        Relay? wanted = state.LoadReturn?.Relay ?? job.Fixture.CommonReturn;
        if (wanted != loadReturn)
        {
            AddIfAny(open, loadReturn);
            AddIfAny(close, wanted);
        }

        await SwitchAsync(lane, open, close, cancellation);
        lane.Path = path;
        lane.Closed = null;
        loadReturn = wanted;
    }

    /// <summary>Opens what a lane holds.</summary>
    public async Task DisconnectAsync(Lane lane, CancellationToken cancellation)
    {
        List<Relay> open = [.. lane.Path];
        if (lane.Closed is { } closed)
        {
            open.Add(closed.Relay);
        }

        if (open.Count > 0)
        {
            await ledger.SwitchingAsync(bench.SwitchAsync(new SwitchOrder(open, []), watch.PollIfDueAsync, cancellation));
        }

        lane.Path = [];
        lane.Closed = null;
    }

    /// <summary>Switches the load that a lane's plan wants, break before make.</summary>
    public async Task LoadAsync(Lane lane, CancellationToken cancellation)
    {
        Load? wanted = lane.Wanted!.Point.Load;
        if (wanted == lane.Closed)
        {
            return;
        }

        if (wanted is not null && SafeLoading.Refusal(job, lane.State!, wanted) is { } refusal)
        {
            throw new BenchFaultException(BenchFault.OrderRefused, refusal);
        }

        await SwitchAsync(
            lane, lane.Closed is { } closed ? [closed.Relay] : [], wanted is null ? [] : [wanted.Relay], cancellation);
        lane.Closed = wanted;
    }

    /// <summary>
    /// Lets the meter see the load point and waits until it has settled; the mirror contacts are compared on the way.
    /// </summary>
    /// <returns>Whether the load's contact is proved: null where not wired or unloaded.</returns>
    public async Task<bool?> SettleAsync(Lane lane, CancellationToken cancellation)
    {
        StateJob state = lane.State!;
        LoadPoint point = lane.Wanted!.Point;
        Relay sense = point.Sensed == Sensed.LoadReturn ? state.LoadReturn!.SenseRelay : state.Output.Sense;
        Deadline senseAtRest = await SenseAsync(state.Meter, sense, cancellation);
        Deadline atRest = Later(lane.AtRest, senseAtRest);
        await ledger.SettlingAsync(watch.UntilAsync(atRest, cancellation), atRest.Remaining);
        ContactCheck contacts = await ledger.SwitchingAsync(bench.CheckContactsAsync(watch.PollIfDueAsync, cancellation));
        Deadline settled = Later(lane.Settled, WarmedUp);
        await ledger.SettlingAsync(watch.UntilAsync(settled, cancellation), TimeSpan.Zero);
        return Proof(contacts, point.Load);
    }

    /// <summary>Sets the range and takes the readings of a settled load point; uses the meter's link alone.</summary>
    public async Task<IReadOnlyList<MeterReading>> ReadAsync(Lane lane, CancellationToken cancellation)
    {
        StateJob state = lane.State!;
        await bench.SetRangeAsync(state.Meter, state.Range, cancellation);
        int count = lane.Wanted!.Count;
        return await ledger.ReadingAsync(
            bench.ReadAsync(state.Meter, count, cancellation), count * state.Meter.Integration * timeScale);
    }

    /// <summary>Lets a meter see one sense relay and no other.</summary>
    /// <returns>When that contact is at rest.</returns>
    public async Task<Deadline> SenseAsync(Meter meter, Relay sense, CancellationToken cancellation)
    {
        if (sensed.TryGetValue(meter.Name, out Relay? before) && before == sense)
        {
            return Deadline.In(time, TimeSpan.Zero);
        }

        Switched switched = await ledger.SwitchingAsync(
            bench.SwitchAsync(new SwitchOrder(before is null ? [] : [before], [sense]), watch.PollIfDueAsync, cancellation));
        sensed[meter.Name] = sense;
        return Deadline.After(time, switched.AcknowledgedTimestamp, switched.ContactTime);
    }

    private async Task SwitchAsync(
        Lane lane, IReadOnlyList<Relay> open, IReadOnlyList<Relay> close, CancellationToken cancellation)
    {
        Switched switched = await ledger.SwitchingAsync(
            bench.SwitchAsync(new SwitchOrder(open, close), watch.PollIfDueAsync, cancellation));
        lane.AtRest = Deadline.After(time, switched.AcknowledgedTimestamp, switched.ContactTime);
        TimeSpan settle = switched.ContactTime + (lane.State!.State.Settle * timeScale);
        lane.Settled = Deadline.After(time, switched.AcknowledgedTimestamp, settle);
    }

    private bool? Proof(ContactCheck contacts, Load? load)
    {
        // A load that does not close is the planner's and the diagnosis's business; any other contact that contradicts
        // its coil means that the readings would be of something else.
        if (contacts.NotOpen.Count > 0)
        {
            throw Contradicted(contacts.NotOpen[0], "closed", "off", "welded");
        }

        if (contacts.NotClosed.FirstOrDefault(relay => !loadRelays.Contains(relay)) is { } dead)
        {
            throw Contradicted(dead, "open", "on", "not closing");
        }

        return load?.Relay.ContactInput is null ? null : contacts.Proved.Contains(load.Relay);
    }

    private static BenchFaultException Contradicted(Relay relay, string reads, string coil, string suspicion) =>
        new(
            BenchFault.ContactContradicted,
            $"contact of unit {relay.Unit} coil {relay.Coil} reads {reads} though its coil is {coil}: "
            + $"relay {suspicion} or its readback broken");

    private static void AddIfAny(List<Relay> relays, Relay? relay)
    {
        if (relay is not null)
        {
            relays.Add(relay);
        }
    }

    private static Deadline Later(Deadline one, Deadline other) => one.Remaining > other.Remaining ? one : other;
}
