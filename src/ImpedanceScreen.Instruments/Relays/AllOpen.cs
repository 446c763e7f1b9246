using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Timing;

namespace ImpedanceScreen.Instruments.Relays;

/// <summary>
/// Opens every relay as one operation. Links are worked off side by side, so that a dead one delays no other; a unit
/// that does not confirm
/// is tried again on a new link until the deadline. Then the mirror contacts that are wired must read open.
/// </summary>
internal sealed class AllOpen(
    IEnumerable<UnitRelays> units, IReadOnlyDictionary<Relay, string> names, TimeProvider time, double timeScale)
{
    private static readonly TimeSpan AllowedTime = TimeSpan.FromSeconds(5);
    private static readonly TimeSpan PauseBetweenRounds = TimeSpan.FromMilliseconds(20);
    private const int ContactReadsMost = 3;

    public async Task<AllOpenOutcome> RunAsync()
    {
        using var limit = new TimeLimit(time, AllowedTime, CancellationToken.None);
        IEnumerable<string>[] alarms = await Task.WhenAll(
            units.GroupBy(unit => unit.Unit.Link.Name).Select(ofLink => OpenAsync([.. ofLink], limit)));
        string alarm = string.Join(' ', alarms.SelectMany(ofLink => ofLink));
        return new AllOpenOutcome(alarm.Length == 0, alarm);
    }

    private async Task<IEnumerable<string>> OpenAsync(UnitRelays[] ofLink, TimeLimit limit)
    {
        // Whatever ends this early leaves an alarm: a unit is confirmed only when its last step has succeeded.
        Dictionary<UnitRelays, string> alarms =
            ofLink.ToDictionary(unit => unit, unit => NotConfirmed(unit, "it did not answer in time."));
        try
        {
            await OpenCoilsAsync(ofLink, alarms, limit.Token);
            Deadline released = Deadline.In(time, ofLink.Max(unit => unit.Unit.Unit.Release) * timeScale);
            foreach (UnitRelays unit in ofLink)
            {
                alarms[unit] = await ProveContactsAsync(unit, released, limit.Token);
            }
        }
        catch (OperationCanceledException) when (limit.Expired)
        {
            // The alarms say how far it came.
        }

        return alarms.Values.Where(alarm => alarm.Length > 0);
    }

    private async Task OpenCoilsAsync(
        UnitRelays[] ofLink, Dictionary<UnitRelays, string> alarms, CancellationToken cancellation)
    {
        // Those that answered last come first: a dead unit's time-outs must not hold up the others.
        List<UnitRelays> pending = [.. ofLink.OrderBy(unit => unit.Unit.IsFailing)];
        while (true)
        {
            foreach (UnitRelays unit in pending.ToArray())
            {
                if (await TryOpenAsync(unit, cancellation) is { } failure)
                {
                    alarms[unit] = failure;
                }
                else
                {
                    alarms[unit] = NotConfirmed(unit, "its contacts were not read in time.");
                    pending.Remove(unit);
                }
            }

            if (pending.Count == 0)
            {
                return;
            }

            await Task.Delay(PauseBetweenRounds, time, cancellation);
        }
    }

    private static async Task<string?> TryOpenAsync(UnitRelays unit, CancellationToken cancellation)
    {
        try
        {
            await unit.OpenAllAsync(cancellation);
            return null;
        }
        catch (BenchFaultException e)
        {
            await unit.Unit.Client.ReopenAsync();
            return NotConfirmed(unit, e.Message);
        }
    }

    private static string NotConfirmed(UnitRelays unit, string why) =>
        $"unit '{unit.Unit.Unit.Name}' is not confirmed open: {why}";

    private async Task<string> ProveContactsAsync(UnitRelays unit, Deadline released, CancellationToken cancellation)
    {
        try
        {
            string stuck = string.Empty;
            bool closed = unit.HasContacts;
            for (int reads = 0; closed && reads < ContactReadsMost; reads++)
            {
                await released.WaitAsync(cancellation);
                released = Deadline.In(time, unit.Unit.Unit.Release * timeScale);
                var contacts = await unit.ReadContactsAsync(FixtureUnit.NothingBetween, cancellation);
                stuck = string.Join(", ", contacts.Where(read => read.Contact).Select(read => names[read.Relay]));
                closed = stuck.Length > 0;
            }

            return closed
                ? $"Contacts read closed though their coils are off: {stuck}. A contact may be welded: "
                    + "switch the fixture's supply off and look at the relay."
                : string.Empty;
        }
        catch (BenchFaultException e)
        {
            return $"Contacts of unit '{unit.Unit.Unit.Name}' could not be read: {e.Message}";
        }
    }
}
