using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Attempts;
using ImpedanceScreen.Screening.Status;
using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.Screening;

/// <summary>The way of a board where two outputs, each on a load bank of its own, may be loaded at once.</summary>
public sealed class OverlappedWayTests
{
    private static readonly ScreeningJob Overlapped = SmallJob.Make(ownBanks: true);
    private static readonly ScreeningJob Sequential =
        Overlapped with { Fixture = Overlapped.Fixture with { OutputsLoadedAtOnce = 1 } };

    [Fact]
    public void While_the_meter_reads_one_output_the_next_load_of_the_other_is_switched()
    {
        var trial = new Trial(Overlapped);
        trial.Run();

        Assert.Equal(
            [
                "bank-1 L10k beside TIDE", "bank-2 L10k beside ALARM", "bank-1 L4k7 beside TIDE",
                "bank-2 L4k7 beside ALARM", "bank-1 L2k2 beside TIDE", "bank-2 L2k2 beside ALARM",
                // TIDE has come to its end: nothing is left to be read beside the second state of ALARM.
                "bank-1 L10k", "bank-1 L4k7", "bank-1 L2k2",
            ],
            trial.LoadsClosed);
    }

    [Fact]
    public void No_relay_of_the_output_being_read_moves_and_no_output_ever_has_two_loads()
    {
        var trial = new Trial(Overlapped);
        trial.Run();

        Assert.Equal(2, trial.MostLoadedAtOnce);
        Assert.Empty(trial.Violations);
    }

    [Fact]
    public void Where_the_fixture_allows_one_loaded_output_load_banks_of_their_own_change_nothing()
    {
        var trial = new Trial(Sequential);
        trial.Run();

        Assert.Equal(1, trial.MostLoadedAtOnce);
        Assert.Empty(trial.Violations);
        Assert.Equal(9, trial.LoadsClosed.Count);
        Assert.DoesNotContain(trial.LoadsClosed, each => each.Contains("beside", StringComparison.Ordinal));
    }

    [Fact]
    public void Results_stand_in_the_order_of_the_limit_file_and_are_those_of_the_sequential_way()
    {
        BoardRecord overlapped = new Trial(Overlapped).Run();
        BoardRecord sequential = new Trial(Sequential).Run();

        Assert.Equal(
            ["ALARM high", "ALARM low", "TIDE idle"],
            overlapped.States.Select(result => $"{result.Output} {result.State}"));
        Assert.Equal((Disposition.Pass, ""), (overlapped.Disposition, overlapped.Cause));
        Assert.Equal(
            sequential.States.SelectMany(result => result.Decisions), overlapped.States.SelectMany(result => result.Decisions));
        Assert.True(
            overlapped.EndedAt - overlapped.StartedAt < sequential.EndedAt - sequential.StartedAt,
            "settling beside the meter's integration saves time");
    }

    [Fact]
    public void Whenever_the_interlock_breaks_all_relays_open_next_and_nothing_else_is_done()
    {
        int aborted = 0;
        while (true)
        {
            var trial = new Trial(Overlapped) { BrokenAtPoll = aborted + 1 };
            BoardRecord board = trial.Run();
            if (board.Disposition == Disposition.Pass)
            {
                break;
            }

            aborted++;
            Assert.Equal(Disposition.Aborted, board.Disposition);
            Assert.Contains("interlock broken", board.Cause, StringComparison.Ordinal);
            Assert.Equal(["poll", "open all"], trial.Bench.Events[^2..]);
            Assert.Empty(trial.Bench.Closed);
        }

        // 60 readings of 20 ms with the inputs read every 10 ms, settling not counted.
        Assert.True(aborted >= 120, $"{aborted} instants tried");
    }

    /// <summary>One attempt at a good board, watched event by event.</summary>
    private sealed class Trial
    {
        private readonly FakeTimeProvider time = new(new DateTimeOffset(2026, 11, 30, 8, 0, 0, TimeSpan.Zero));
        private readonly ScreeningJob job;
        private FixtureOutput? reading;
        private int polls;

        public Trial(ScreeningJob job)
        {
            this.job = job;
            Bench = new ScriptedBench(job, time)
            {
                Integration = job.Fixture.Meters[0].Integration,
                Inputs = inputs => ++polls == BrokenAtPoll ? inputs with { InterlockClosed = false } : inputs,
            };
            Bench.Before = Watch;
        }

        public ScriptedBench Bench { get; }

        public int? BrokenAtPoll { get; init; }

        public int MostLoadedAtOnce { get; private set; }

        public List<string> LoadsClosed { get; } = [];

        public List<string> Violations { get; } = [];

        public BoardRecord Run()
        {
            var order = new AttemptOrder(
                Guid.CreateVersion7(time.GetUtcNow()), job, "S-001", 1, null, false, "lot", "jo", time.GetUtcNow());
            var settings = new BenchSettings(
                "test-station", "1.0", new Dictionary<string, string>(), 1.0, time, new InlineScheduler());
            var attempt = new BoardAttempt(Bench, order, settings, new StatusBoard(time));
            return FakeTime.Run(time, () => attempt.RunAsync(default)).Record;
        }

        // Called before each event, so it sees what the events before have left closed.
        private void Watch(string what)
        {
            int[] loaded =
                [.. job.Fixture.LoadBanks.Select(bank => bank.Loads.Count(load => Bench.Closed.Contains(load.Relay)))];
            MostLoadedAtOnce = Math.Max(MostLoadedAtOnce, loaded.Count(loads => loads > 0));
            if (loaded.Any(loads => loads > 1))
            {
                Violations.Add($"two loads of one bank closed before: {what}");
            }

            if (what == "read")
            {
                reading = job.Fixture.Outputs.SingleOrDefault(output => Bench.Closed.Contains(output.Sense));
            }
            else if (what == "read ends")
            {
                reading = null;
            }
            else if (what.StartsWith("switch", StringComparison.Ordinal))
            {
                WatchSwitching(what);
            }
        }

        private void WatchSwitching(string what)
        {
            string[] words = what.Split(' ');
            HashSet<string> closing = [.. words[4].Split(',')];
            HashSet<string> moving = [.. closing, .. words[2].Split(',')];
            LoadsClosed.AddRange(
                from bank in job.Fixture.LoadBanks
                from load in bank.Loads
                where closing.Contains($"{load.Relay.Coil}")
                select reading is null ? $"{bank.Name} {load.Name}" : $"{bank.Name} {load.Name} beside {reading.Name}");
            if (reading is not null && OfOutput(reading).Any(relay => moving.Contains($"{relay.Coil}")))
            {
                Violations.Add($"while {reading.Name} is read: {what}");
            }
        }

        private IEnumerable<Relay> OfOutput(FixtureOutput output) =>
        [
            output.Selector, output.Sense, .. job.Fixture.Stimuli.Where(_ => output.Name == "ALARM").Select(each => each.Relay),
            .. job.Fixture.LoadBanks.Single(bank => bank.Name == output.LoadBank).Loads.Select(load => load.Relay),
        ];
    }
}
