using ImpedanceScreen.Benchmarks.Programs;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records;
using ImpedanceScreen.Records.Auditing;
using ImpedanceScreen.SimulatedBench.Logging;

namespace ImpedanceScreen.Benchmarks.Kills;

/// <summary>Judges by the bench's own log and by the store what a program that was killed has left.</summary>
internal sealed class KillJudge(OutlivingBench bench)
{
    // The watchdogs are the simulated bench's own, and this machine may be busy: far beyond their second of silence.
    private static readonly TimeSpan WatchdogLimit = TimeSpan.FromSeconds(10);
    private static readonly TimeSpan Step = TimeSpan.FromMilliseconds(20);

    private readonly List<string> violations = [];
    private readonly List<int> starts = [];
    private int judged;

    /// <summary>The station is about to be started.</summary>
    public void Starting() => starts.Add(bench.Events.Count);

    /// <summary>Waits until the relay units' own watchdogs have opened what a dead program left closed.</summary>
    public async Task AwaitWatchdogsAsync(CancellationToken cancellation)
    {
        DateTimeOffset limit = DateTimeOffset.UtcNow + WatchdogLimit;
        while (bench.Closed(bench.Events).Count > 0)
        {
            await Task.Delay(Step, cancellation);
            if (DateTimeOffset.UtcNow > limit)
            {
                violations.Add($"after start {starts.Count} no watchdog opened the relays");
                return;
            }
        }
    }

    /// <summary>The station has ended: what is sorted by now must be in the store by now.</summary>
    public async Task LookAsync()
    {
        List<(string Label, string Bin)> sorted = Sorted(bench.Events);
        await using RecordStore store = RecordStore.Open(bench.Store);
        foreach ((string label, string bin) in sorted.Skip(judged))
        {
            IReadOnlyList<RecordedAttempt> attempts = await AttemptsAsync(store, label);
            if (!attempts.Any(attempt => BinOf(attempt.Disposition) == bin))
            {
                violations.Add($"{label} went to {bin} without such a record");
            }
        }

        judged = sorted.Count;
    }

    /// <summary>Judges the whole.</summary>
    public async Task<KillReport> ReportAsync(int kills, int atHandshake, int holds)
    {
        IReadOnlyList<BenchEvent> events = bench.Events;
        foreach (int start in starts)
        {
            JudgeStart(events, start);
        }

        if (bench.Closed(events) is { Count: > 0 } closed)
        {
            violations.Add($"closed in the end: {string.Join(", ", closed)}");
        }

        List<(string Label, string Bin)> sorted = Sorted(events);
        int attempts = 0;
        await using (RecordStore store = RecordStore.Open(bench.Store))
        {
            foreach ((string label, string bin) in sorted)
            {
                IReadOnlyList<RecordedAttempt> recorded = await AttemptsAsync(store, label);
                attempts += recorded.Count;
                if (recorded.Count == 0 || BinOf(recorded[^1].Disposition) != bin)
                {
                    violations.Add($"{label}: bin {bin}, but its last record says otherwise");
                }
            }

            if (await store.UnfinishedAttemptsAsync(bench.Job.Fixture.Name) is { Count: > 0 } unfinished)
            {
                violations.Add($"{unfinished.Count} attempts unfinished in the end");
            }
        }

        violations.AddRange(sorted.GroupBy(board => board.Label).Where(group => group.Count() > 1)
            .Select(group => $"{group.Key} was sorted {group.Count()} times"));
        AuditReport audit = Audit.Run(bench.Store);
        violations.AddRange(audit.Findings.Select(finding => $"audit: {finding}"));
        return new KillReport(kills, atHandshake, sorted.Count, audit.Records, attempts, holds, violations);
    }

    // Whatever an earlier program left closed is opened before anything closes.
    private void JudgeStart(IReadOnlyList<BenchEvent> events, int start)
    {
        HashSet<Relay> switching = [.. FixtureRelays.Switching(bench.Job.Fixture)];
        for (int i = start; i < events.Count; i++)
        {
            if (events[i] is CoilChanged { On: true } coil
                && switching.Any(relay => relay.Unit == coil.Unit && relay.Coil == coil.Coil))
            {
                HashSet<(string, ushort)> left = bench.Closed(events.Take(i));
                if (left.Count > 0)
                {
                    violations.Add($"after a restart {coil.Unit} {coil.Coil} closed while others were closed: {left.First()}");
                }

                return;
            }
        }
    }

    // Each board that was told to leave, with the bin that the coils named at that moment.
    private List<(string Label, string Bin)> Sorted(IReadOnlyList<BenchEvent> events)
    {
        Handshake handshake = bench.Job.Fixture.Handshake!;
        List<(string Label, string Bin)> sorted = [];
        HashSet<(string, ushort)> on = [];
        string label = "";
        foreach (BenchEvent each in events)
        {
            switch (each)
            {
                case BoardPresented board:
                    label = board.Label;
                    break;
                case CoilChanged { On: false } coil:
                    on.Remove((coil.Unit, coil.Coil));
                    break;
                case CoilChanged coil:
                    on.Add((coil.Unit, coil.Coil));
                    if ((coil.Unit, coil.Coil) == Key(handshake.Done))
                    {
                        sorted.Add((label, Bin(handshake, on)));
                    }

                    break;
                case BoardLifted lifted when sorted.Count == 0 || sorted[^1] != (lifted.Label, lifted.Bin):
                    violations.Add($"{lifted.Label} left for {lifted.Bin} without being told so");
                    break;
            }
        }

        return sorted;
    }

    private Task<IReadOnlyList<RecordedAttempt>> AttemptsAsync(RecordStore store, string label) =>
        store.AttemptsAsync(bench.Job.Limits.Product, label);

    private static string Bin(Handshake handshake, HashSet<(string, ushort)> on) =>
        on.Contains(Key(handshake.PassBin)) ? "pass" : on.Contains(Key(handshake.FailBin)) ? "fail" : "retest";

    private static (string, ushort) Key(Relay relay) => (relay.Unit, relay.Coil);

    private static string BinOf(Disposition disposition) => disposition switch
    {
        Disposition.Pass => "pass",
        Disposition.Fail => "fail",
        _ => "retest",
    };
}
