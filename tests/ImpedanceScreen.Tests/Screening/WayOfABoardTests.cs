using ImpedanceScreen.Bench;
using ImpedanceScreen.Decisions;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Lots;
using ImpedanceScreen.Screening.Serials;
using ImpedanceScreen.Screening.Status;
using Microsoft.Extensions.Logging.Abstractions;
using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.Screening;

public sealed class WayOfABoardTests
{
    private readonly FakeTimeProvider time = new(new DateTimeOffset(2026, 11, 30, 8, 0, 0, TimeSpan.Zero));
    private ScreeningJob job = SmallJob.Make();
    private ScriptedBench bench;
    private MemoryStore store;

    public WayOfABoardTests()
    {
        bench = new ScriptedBench(job, time);
        store = new MemoryStore(bench.Events);
    }

    private IEnumerable<BoardRecord> Boards => store.Records.OfType<BoardRecord>();

    [Fact]
    public void A_good_lot_passes_and_is_closed()
    {
        LotEnd end = Run(["S-001", "S-002"]);

        Assert.Equal(LotEndKind.Complete, end.Kind);
        Assert.All(Boards, board => Assert.Equal((Disposition.Pass, ""), (board.Disposition, board.Cause)));
        Assert.Equal(["S-001", "S-002"], Boards.Select(board => board.Serial));
        Assert.IsType<LotCloseRecord>(store.Records[^1]);
        Assert.Empty(bench.Closed);
        Assert.Empty(store.Unfinished);
    }

    [Fact]
    public void The_handshake_keeps_its_order_and_no_board_is_sorted_before_its_record()
    {
        Run(["S-001"]);

        string[] steps =
        [
            .. bench.Events.Where(each => each.StartsWith("handshake", StringComparison.Ordinal)
                || each.StartsWith("begin", StringComparison.Ordinal) || each.StartsWith("record S", StringComparison.Ordinal)
                || each == "finish"),
        ];
        Assert.Equal(
            [
                "handshake None busy", "begin S-001", "record S-001 Pass", "handshake Pass busy", "handshake Pass busy done",
                "finish", "handshake None busy", "handshake None",
            ],
            steps);
    }

    [Fact]
    public void All_relays_open_before_anything_else_and_unloaded_is_read_before_any_load_closes()
    {
        Run(["S-001"]);

        Assert.Equal(["start", "open all"], bench.Events.Take(2));
        int firstRead = bench.Events.IndexOf("read");
        int firstLoad = bench.Events.FindIndex(each => each.StartsWith("switch", StringComparison.Ordinal) && each.EndsWith(" 10", StringComparison.Ordinal));
        Assert.InRange(firstRead, 1, firstLoad);
    }

    [Fact]
    public void Supply_comes_first_and_goes_off_before_the_outputs_are_proved_discharged()
    {
        Run(["S-001"]);

        List<string> switched = [.. bench.Events.Where(each => each.StartsWith("switch", StringComparison.Ordinal))];
        Assert.Equal("switch open - close 30", switched[0]);
        int off = bench.Events.IndexOf("switch open 30 close -");
        Assert.Equal(2, bench.Events.Skip(off).Count(each => each == "read"));
    }

    [Fact]
    public void Inputs_are_read_at_their_interval_during_settling_and_reading()
    {
        List<DateTimeOffset> polls = [];
        bench.Before = each =>
        {
            if (each == "poll")
            {
                polls.Add(time.GetUtcNow());
            }
        };
        Run(["S-001"]);

        int largest = polls.Zip(polls.Skip(1), (one, next) => (int)(next - one).TotalMilliseconds).Max();
        Assert.InRange(largest, 0, (int)job.Fixture.Inputs.Poll.TotalMilliseconds + 1);
    }

    [Fact]
    public void A_broken_interlock_opens_the_relays_next_and_the_attempt_is_aborted()
    {
        int polls = 0;
        bench.Inputs = inputs => ++polls == 25 ? inputs with { InterlockClosed = false } : inputs;
        LotEnd end = Run(["S-001"]);

        Assert.Equal(LotEndKind.Complete, end.Kind);
        Assert.Equal([Disposition.Aborted, Disposition.Pass], Boards.Select(board => board.Disposition));
        Assert.Contains("interlock broken", Boards.First().Cause, StringComparison.Ordinal);
        int broken = bench.Events.Select((each, index) => (each, index)).Where(each => each.each == "poll").ElementAt(24).index;
        Assert.Equal("open all", bench.Events[broken + 1]);
        Assert.Equal(Boards.First().AttemptId, Boards.Last().PreviousAttemptId);
        Assert.Equal(2, Boards.Last().Attempt);
    }

    [Fact]
    public void A_lifted_board_is_aborted_and_screened_again_when_it_is_back()
    {
        int polls = 0;
        bench.Inputs = inputs => ++polls is >= 25 and < 40 ? inputs with { BoardPresent = false } : inputs;
        Run(["S-001"]);

        Assert.Equal([Disposition.Aborted, Disposition.Pass], Boards.Select(board => board.Disposition));
    }

    [Fact]
    public void Relays_that_do_not_open_put_the_bench_on_hold_and_nothing_is_sorted()
    {
        bench.Before = each => bench.CanOpen = bench.CanOpen && each != "read";
        LotEnd end = Run(["S-001", "S-002"]);

        Assert.Equal(LotEndKind.OnHold, end.Kind);
        Assert.Contains("unit a coil 1", end.Words, StringComparison.Ordinal);
        Assert.Equal(Disposition.Aborted, Assert.Single(Boards).Disposition);
        Assert.DoesNotContain(bench.Events, each => each.Contains("done", StringComparison.Ordinal));
        Assert.Contains(store.Records, record => record is HoldRecord);
    }

    [Fact]
    public void One_bench_fault_is_worked_through_a_second_in_a_row_holds()
    {
        int reads = 0;
        bench.Before = each =>
        {
            if (each == "read" && ++reads is 5 or 6)
            {
                throw new BenchFaultException(BenchFault.MeterLost, "meter gives no answer: look at its cable");
            }
        };
        LotEnd end = Run(["S-001"]);

        Assert.Equal(LotEndKind.OnHold, end.Kind);
        Assert.Contains("cable", end.Words, StringComparison.Ordinal);
        Assert.Equal(2, bench.Events.Count(each => each == "start"));
    }

    [Fact]
    public void A_record_that_cannot_be_kept_sorts_nothing()
    {
        store.Fault = record => record is BoardRecord ? new StoreFaultException("disk full") : null;
        LotEnd end = Run(["S-001"]);

        Assert.Equal(LotEndKind.StoreFault, end.Kind);
        Assert.DoesNotContain(bench.Events, each => each.Contains("done", StringComparison.Ordinal));
        Assert.Empty(bench.Closed);
    }

    [Fact]
    public void Told_to_stop_the_relays_open_and_the_attempt_is_recorded_as_aborted()
    {
        using var stop = new CancellationTokenSource();
        int reads = 0;
        bench.Before = each =>
        {
            if (each == "read" && ++reads == 7)
            {
                stop.Cancel();
            }
        };
        LotEnd end = Run(["S-001"], stop: stop.Token);

        Assert.Equal(LotEndKind.Stopped, end.Kind);
        Assert.Equal(Disposition.Aborted, Assert.Single(Boards).Disposition);
        Assert.Empty(bench.Closed);
    }

    [Fact]
    public void Told_to_stop_a_board_that_is_sorted_leaves_first()
    {
        using var stop = new CancellationTokenSource();
        bench.Before = each =>
        {
            if (each == "handshake Pass busy done")
            {
                stop.Cancel();
            }
        };
        LotEnd end = Run(["S-001", "S-002"], stop: stop.Token);

        Assert.Equal(LotEndKind.Stopped, end.Kind);
        Assert.Equal(Disposition.Pass, Assert.Single(Boards).Disposition);
        Assert.Empty(store.Unfinished);
        Assert.Equal("handshake None", bench.Events.Last(each => each.StartsWith("handshake", StringComparison.Ordinal)));
    }

    [Fact]
    public void Told_to_stop_a_board_that_does_not_leave_is_not_waited_for_long()
    {
        using var stop = new CancellationTokenSource();
        bench.Leaves = false;
        bench.Before = each =>
        {
            if (each == "handshake Pass busy done")
            {
                stop.Cancel();
            }
        };
        DateTimeOffset begun = time.GetUtcNow();
        LotEnd end = Run(["S-001"], stop: stop.Token);

        Assert.Equal(LotEndKind.Stopped, end.Kind);
        Assert.Single(store.Unfinished);
        Assert.InRange((time.GetUtcNow() - begun).TotalSeconds, 5, 10);
    }

    [Fact]
    public void A_board_that_failed_before_does_not_pass_by_being_tried_again()
    {
        Run(["S-001"]);
        store.Records[0] = Boards.First() with { Disposition = Disposition.Fail, Lot = "another" };
        bench.Present = true;
        Run(["S-001"]);

        Assert.Equal(Disposition.Fail, Boards.Last().Disposition);
        Assert.Contains("earlier attempt failed", Boards.Last().Cause, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_lost_attempt_is_recorded_as_aborted_and_its_board_screened_again()
    {
        await store.BeginAttemptAsync(new AttemptStart(
            Guid.CreateVersion7(), "Small-1", "S-001", "lot", "small-bench", time.GetUtcNow()));
        bench.Handshake = new HandshakeState(SortBin.None, Busy: true, Done: false);
        Run(["S-001", "S-002"]);

        Assert.Equal(["S-001", "S-001", "S-002"], Boards.Select(board => board.Serial));
        Assert.Equal([Disposition.Aborted, Disposition.Pass, Disposition.Pass], Boards.Select(board => board.Disposition));
    }

    [Fact]
    public void A_board_of_unknown_identity_holds_until_a_person_names_it()
    {
        Run(["S-001"]);
        store.Unfinished.Add(new UnfinishedAttempt(
            new AttemptStart(Boards.First().AttemptId, "Small-1", "S-001", "lot", "small-bench", time.GetUtcNow()), Disposition.Pass));
        bench.Present = true;
        LotEnd unknown = Run(["S-001", "S-002"]);
        LotEnd named = Run(["S-001", "S-002"], inNest: "S-002");

        Assert.Equal(LotEndKind.OnHold, unknown.Kind);
        Assert.Equal(LotEndKind.Complete, named.Kind);
        Assert.Equal(["S-001", "S-002"], Boards.Select(board => board.Serial));
    }

    [Fact]
    public void A_defect_of_the_program_itself_still_opens_all_relays()
    {
        bench.Before = each =>
        {
            if (each == "read")
            {
                throw new InvalidOperationException("a defect");
            }
        };

        Assert.Throws<InvalidOperationException>(() => Run(["S-001"]));
        Assert.Equal("open all", bench.Events[^1]);
        Assert.Empty(bench.Closed);
    }

    [Fact]
    public void Without_a_handler_the_next_serial_number_waits_until_the_board_before_was_taken_out()
    {
        ByHand();
        int pollsWithBoard = 0;
        bench.Inputs = inputs =>
        {
            // A person takes the board out after a while, and puts the next one in after another.
            pollsWithBoard += store.Records.Count == 1 ? 1 : 0;
            return inputs with { BoardPresent = pollsWithBoard is 0 or <= 50 or > 60 };
        };
        LotEnd end = Run(["S-001", "S-002"]);

        Assert.Equal(LotEndKind.Complete, end.Kind);
        Assert.Equal(["S-001", "S-002"], Boards.Select(board => board.Serial));
        int second = bench.Events.IndexOf("begin S-002");
        int first = bench.Events.IndexOf("record S-001 Pass");
        Assert.True(bench.Events[first..second].Count(each => each == "poll") > 60, "not before it was out and back");
    }

    [Fact]
    public void Without_a_handler_a_board_that_stays_is_never_screened_as_the_next()
    {
        ByHand();
        using var stop = new CancellationTokenSource();
        int polls = 0;
        bench.Inputs = inputs =>
        {
            if (store.Records.Count == 1 && ++polls == 1000)
            {
                stop.Cancel();
            }

            return inputs;
        };
        LotEnd end = Run(["S-001", "S-002"], stop: stop.Token);

        Assert.Equal(LotEndKind.Stopped, end.Kind);
        Assert.Equal("S-001", Assert.Single(Boards).Serial);
        Assert.Single(store.Unfinished);
    }

    [Fact]
    public void What_was_read_of_a_state_that_was_cut_short_stays_in_the_record()
    {
        int reads = 0;
        bench.Before = each =>
        {
            if (each == "read" && ++reads == 9)
            {
                throw new BenchFaultException(BenchFault.MeterLost, "meter gives no answer");
            }
        };
        Run(["S-001"]);

        StateResult cut = Assert.Single(Boards.First().States);
        Assert.Equal((null, Decision.Undecided), (cut.Estimate, cut.Decision));
        Assert.Equal([null, "L10k"], cut.Points.Select(point => point.Load));
        Assert.All(cut.Points, point => Assert.Equal(4, point.Readings.Count));
    }

    [Fact]
    public void A_finished_lot_that_is_started_once_more_is_not_closed_again()
    {
        Run(["S-001"]);
        Run(["S-001"]);

        Assert.Single(store.Records.OfType<LotCloseRecord>());
    }

    private void ByHand()
    {
        job = job with { Fixture = job.Fixture with { Handshake = null } };
        bench = new ScriptedBench(job, time);
        store = new MemoryStore(bench.Events);
    }

    private LotEnd Run(string[] serials, string? inNest = null, CancellationToken stop = default)
    {
        var order = new LotOrder(job, "lot", "jo", new ListedSerials(serials), inNest, ClosesLot: true);
        var settings = new RunSettings("1.0", 1.0, time, new InlineScheduler());
        var runner = new LotRunner(
            bench, store, new StatusBoard(time), order, settings, NullLogger<LotRunner>.Instance);
        return FakeTime.Run(time, () => runner.RunAsync(stop));
    }
}
