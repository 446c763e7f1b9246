using ImpedanceScreen.Instruments;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records;
using ImpedanceScreen.Records.Auditing;
using ImpedanceScreen.Screening.Lots;
using ImpedanceScreen.Screening.Serials;
using ImpedanceScreen.Screening.Status;
using ImpedanceScreen.SimulatedBench;
using ImpedanceScreen.SimulatedBench.Logging;
using ImpedanceScreen.SimulatedBench.Populations;
using Microsoft.Extensions.Logging.Abstractions;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>A lot from the first board to the signed close: real instruments, bench loop and store.</summary>
[Collection(RealTime.Name)]
public sealed class WholeLotTests : IDisposable
{
    private const double TimeScale = 0.02;
    private const int Boards = 6;
    private const ulong Seed = 20;
    private const string FirstSerial = "T6-000001";
    private const string Lot = "L-1";

    private readonly string folder = Directory.CreateTempSubdirectory("lot").FullName;

    private string StoreFile => Path.Combine(folder, "records.db");

    public void Dispose() => Directory.Delete(folder, recursive: true);

    [Theory]
    [InlineData("simulated-bench.yaml")]
    [InlineData("simulated-own-banks.yaml")]
    public async Task Every_board_gets_one_sealed_record_and_goes_where_its_record_says(string fixtureName)
    {
        ScreeningJob job = Tern6.JobOn(fixtureName);
        var options = new SimulatedBenchOptions(job, Tern6.Population, Seed)
        {
            TimeScale = TimeScale, FirstSerial = FirstSerial, Boards = Boards,
        };
        await using SimulatedBenchHost simulated = await SimulatedBenchHost.StartAsync(options);
        RecordStore.Create(StoreFile, "line-3", "1.0", TimeProvider.System);
        await using RecordStore store = RecordStore.Open(StoreFile);
        List<BoardRecord> seen = [];
        LotEnd end = await ScreenAsync(job, simulated, store, seen);

        Assert.True(end.Kind == LotEndKind.Complete, end.Words);
        Assert.Equal([], seen.Where(board => board.Disposition == Disposition.Aborted).Select(board => board.Cause));
        Assert.Equal(SerialRange.From(FirstSerial, Boards), seen.Select(board => board.Serial));
        await AssertStoredAsync(job, store, seen, end);
        AssertSorted(seen, simulated.Events);
        AssertTrue(seen, job);
    }

    private static async Task<LotEnd> ScreenAsync(
        ScreeningJob job, SimulatedBenchHost simulated, RecordStore store, List<BoardRecord> seen)
    {
        await using var bench = new FixtureBench(
            job.Fixture, simulated.Channels, TimeProvider.System, TimeScale, NullLogger.Instance);
        var status = new StatusBoard(TimeProvider.System);
        status.Recorded += seen.Add;
        var order = new LotOrder(job, Lot, "jo", new ListedSerials(SerialRange.From(FirstSerial, Boards)), null, ClosesLot: true);
        var settings = new RunSettings("1.0", TimeScale, TimeProvider.System, TaskScheduler.Default);
        var runner = new LotRunner(bench, store, status, order, settings, NullLogger<LotRunner>.Instance);
        return await runner.RunAsync(default);
    }

    private async Task AssertStoredAsync(ScreeningJob job, RecordStore store, List<BoardRecord> seen, LotEnd end)
    {
        foreach (BoardRecord board in seen)
        {
            RecordedAttempt attempt = Assert.Single(await store.AttemptsAsync(job.Limits.Product, board.Serial));
            Assert.Equal((board.AttemptId, board.Disposition), (attempt.AttemptId, attempt.Disposition));
        }

        Assert.Empty(await store.UnfinishedAttemptsAsync(job.Fixture.Name));
        LotCounts counts = await store.CountLotAsync(Lot);
        Assert.Equal((Boards, Boards, 0), (counts.Boards, counts.Passed + counts.Failed + counts.Retest, counts.Aborted));

        // Record 0, the boards, the close of the lot.
        AuditReport audit = Audit.Run(StoreFile, end.Head);
        Assert.Empty(audit.Findings);
        Assert.Equal((Boards + 2, end.Head), (audit.Records, audit.Head));
    }

    private static void AssertSorted(List<BoardRecord> seen, IReadOnlyList<BenchEvent> events) =>
        Assert.Equal(
            seen.Select(board => (board.Serial, $"{board.Disposition}".ToLowerInvariant())),
            events.OfType<BoardLifted>().Select(lifted => (lifted.Label, lifted.Bin)));

    private static void AssertTrue(List<BoardRecord> seen, ScreeningJob job)
    {
        var factory = new BoardFactory(Tern6.Population, Seed, FirstSerial);
        List<(bool Bad, Disposition Disposition)> judged =
            [.. seen.Select((board, i) => (TruthFile.Judge(factory.Make(i + 1), job.Limits).Bad, board.Disposition))];

        // A lot of one kind would show nothing.
        Assert.InRange(judged.Count(each => each.Bad), 2, Boards - 2);
        Assert.DoesNotContain((true, Disposition.Pass), judged);
        Assert.DoesNotContain((false, Disposition.Fail), judged);
        Assert.Contains((false, Disposition.Pass), judged);
    }
}
