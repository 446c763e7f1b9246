using System.Text;
using ImpedanceScreen.Benchmarks.Programs;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Bodies;
using ImpedanceScreen.SimulatedBench.Logging;
using ImpedanceScreen.SimulatedBench.Populations;
using ImpedanceScreen.Tests.SimulatedBench;

namespace ImpedanceScreen.Tests.Station;

/// <summary>The station as a person starts it, on a simulated bench.</summary>
[Collection(RealTime.Name)]
public sealed class ScreeningCommandTests
{
    private const double Fast = 0.05;
    private const double Slow = 0.5;

    [Theory]
    [InlineData("INT")]
    [InlineData("TERM")]
    public async Task Told_to_stop_it_opens_all_relays_and_records_the_attempt_as_aborted(string signal)
    {
        await using OutlivingBench bench = await OutlivingBench.StartAsync(1, Slow);
        Task loaded = bench.Lines.NextAsync(FirstLoad(bench));
        using StationProgram station = StationProgram.Start(Lot(bench, 3));
        await station.ReachesAsync(loaded);
        Assert.NotEmpty(bench.Closed(bench.Events));
        await station.SignalAsync(signal);
        ProgramEnd end = await station.Ended;

        Assert.Equal(130, end.ExitCode);
        Assert.Empty(bench.Closed(bench.Events));
        Assert.Equal(Disposition.Aborted, Assert.Single(Boards(end)).Disposition);
        Assert.DoesNotContain(bench.Events, each => each is BoardLifted);
        await AssertCleanAsync(bench, records: 2);
    }

    [Fact]
    public async Task A_lot_goes_on_where_it_was_stopped_and_gives_one_line_of_json_a_board()
    {
        await using OutlivingBench bench = await OutlivingBench.StartAsync(2, Fast);
        Task sorted = bench.Lines.NextAsync("\"board-lifted\"");
        using (StationProgram first = StationProgram.Start(Lot(bench, 3)))
        {
            await first.ReachesAsync(sorted);
            await first.SignalAsync("TERM");
            Assert.Equal(130, (await first.Ended).ExitCode);
        }

        ProgramEnd second = await StationProgram.RunAsync(Lot(bench, 3));
        Assert.Equal(0, second.ExitCode);
        Assert.Equal(second.Lines.Length, Boards(second).Count);
        Assert.Equal("T6-000003", Boards(second)[^1].Serial);
        Assert.Equal(3, bench.Events.OfType<BoardLifted>().Count());
        Assert.Equal(0, (await StationProgram.RunAsync(["audit", "--store", bench.Store])).ExitCode);
    }

    [Fact]
    public async Task A_second_station_at_the_same_fixture_is_refused()
    {
        await using OutlivingBench bench = await OutlivingBench.StartAsync(1, Slow);
        Task busy = bench.Lines.NextAsync("\"on\":true");
        using StationProgram first = StationProgram.Start(Lot(bench, 1));
        await first.ReachesAsync(busy);
        ProgramEnd second = await StationProgram.RunAsync(Lot(bench, 1));
        ProgramEnd opening = await StationProgram.RunAsync(["open-relays", "--fixture", bench.Fixture]);

        Assert.Equal((2, 2), (second.ExitCode, opening.ExitCode));
        Assert.Contains("another process works on", second.Errors, StringComparison.Ordinal);
        Assert.Equal(0, (await first.Ended).ExitCode);
        Assert.Equal(Disposition.Pass, Assert.Single(Boards(await first.Ended)).Disposition);
    }

    [Fact]
    public async Task Open_relays_opens_what_a_killed_station_left_closed()
    {
        await using OutlivingBench bench = await OutlivingBench.StartAsync(1, Slow);
        Task loaded = bench.Lines.NextAsync(FirstLoad(bench));
        using StationProgram station = StationProgram.Start(Lot(bench, 1));
        await station.ReachesAsync(loaded);
        station.Kill();
        Assert.Equal(137, (await station.Ended).ExitCode);
        ProgramEnd opening = await StationProgram.RunAsync(["open-relays", "--fixture", bench.Fixture]);

        Assert.Equal(0, opening.ExitCode);
        Assert.Contains("all relays confirmed open", opening.Output, StringComparison.Ordinal);
        Assert.Empty(bench.Closed(bench.Events));
    }

    [Theory]
    [InlineData(false, 0)]
    [InlineData(true, 1)]
    public async Task One_board_gives_its_verdict_as_exit_code(bool dead, int code)
    {
        ulong seed = 1;
        while (!IsWanted(new BoardFactory(Tern6.Population, seed, "T6-000001").Make(1), dead))
        {
            seed++;
        }

        await using OutlivingBench bench = await OutlivingBench.StartAsync(seed, Fast);
        ProgramEnd end = await StationProgram.RunAsync(bench.Arguments("board", "T6-000001"));
        Assert.Equal(code, end.ExitCode);
        Assert.Equal(dead ? Disposition.Fail : Disposition.Pass, Assert.Single(Boards(end)).Disposition);
        await AssertCleanAsync(bench, records: 2);
    }

    [Fact]
    public async Task Typed_serial_numbers_are_checked_and_their_end_closes_the_lot()
    {
        await using OutlivingBench bench = await OutlivingBench.StartAsync(1, Fast);
        using StationProgram station = StationProgram.Start(bench.Arguments("lot", "--lot", "typed"));
        station.Type("T6-000001");
        station.Type("not a serial");
        station.Type("T6-000002");
        station.CloseInput();
        ProgramEnd end = await station.Ended;

        Assert.Equal(0, end.ExitCode);
        Assert.Equal(["T6-000001", "T6-000002"], Boards(end).Select(board => board.Serial));
        Assert.Contains("scan or type", end.Errors, StringComparison.Ordinal);
        await AssertCleanAsync(bench, records: 4);
    }

    [Fact]
    public async Task A_head_written_down_shows_that_a_store_was_cut_or_put_back()
    {
        await using OutlivingBench bench = await OutlivingBench.StartAsync(1, Fast);
        string earlier = Path.Combine(bench.Folder, "earlier.db");
        File.Copy(bench.Store, earlier);
        Assert.Equal(0, (await StationProgram.RunAsync(Lot(bench, 1))).ExitCode);
        string clean = (await StationProgram.RunAsync(["audit", "--store", bench.Store])).Output;
        string head = clean.TrimEnd().Split(' ')[^1];

        Assert.Equal(0, (await StationProgram.RunAsync(["audit", "--store", bench.Store, "--head", head])).ExitCode);
        Assert.Equal(0, (await StationProgram.RunAsync(["audit", "--store", earlier])).ExitCode);
        Assert.Equal(1, (await StationProgram.RunAsync(["audit", "--store", earlier, "--head", head])).ExitCode);
    }

    private static bool IsWanted(SimulatedBoard board, bool dead) =>
        dead ? board.Sources[0].Defect == DefectKind.Dead : board.Sources.All(source => source.Defect is null);

    private static string FirstLoad(OutlivingBench bench) =>
        LineTrigger.On(bench.Job.States[0].Loads[0].Relay);

    private static string[] Lot(OutlivingBench bench, int count) => bench.Arguments(
        "lot", "--lot", "lot-1", "--operator", "jo", "--first-serial", "T6-000001", "--count", $"{count}");

    private static List<BoardRecord> Boards(ProgramEnd end) =>
        [.. end.Lines.Select(line => (BoardRecord)BodyCodec.Decode(Encoding.UTF8.GetBytes(line)))];

    private static async Task AssertCleanAsync(OutlivingBench bench, int records)
    {
        ProgramEnd audit = await StationProgram.RunAsync(["audit", "--store", bench.Store]);
        Assert.StartsWith($"audit clean: {records} records", audit.Output, StringComparison.Ordinal);
    }
}
