using System.Diagnostics;
using System.Globalization;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records;
using ImpedanceScreen.Records.Sealing;
using ImpedanceScreen.Tests.Records.Shared;

namespace ImpedanceScreen.Benchmarks.Records;

/// <summary>
/// Durable append of sealed records over raw inserts into the same tables, in turns within one run; the time to seal
/// and
/// the file's bytes a board beside it.
/// </summary>
internal sealed class AppendCommand : IFigureCommand
{
    private const double RatioWanted = 0.8;
    private const double SealingWantedMs = 0.3;
    private const double BytesWanted = 4096;
    private const int Block = 50;

    public string Name => "append";

    public string Description => "Durable append of sealed records over raw inserts; sealing time; bytes of file a board.";

    public int DefaultCount => 3000;

    public async Task<int> RunAsync(int count, ulong seed, CancellationToken cancellation)
    {
        string folder = Directory.CreateTempSubdirectory("append").FullName;
        try
        {
            return await MeasureAsync(folder, count, (int)(seed % int.MaxValue), cancellation);
        }
        finally
        {
            Directory.Delete(folder, recursive: true);
        }
    }

    private static async Task<int> MeasureAsync(string folder, int count, int seed, CancellationToken cancellation)
    {
        string own = Path.Combine(folder, "own.store");
        string raw = Path.Combine(folder, "raw.store");
        double sealing = double.PositiveInfinity;

        // The best block of each: a busy machine adds time, it never takes any away.
        double ownSeconds = double.PositiveInfinity;
        double rawSeconds = double.PositiveInfinity;
        RecordStore.Create(raw, "line-3", "0.1.0", TimeProvider.System);
        RecordStore.Create(own, "line-3", "0.1.0", TimeProvider.System);
        await using (RecordStore store = RecordStore.Open(own))
        await using (RecordStore attempts = RecordStore.Open(raw))
        using (var inserts = new RawInserts(raw))
        {
            var records = new RandomRecords(seed);
            await store.KeepTextAsync(records.LimitText);
            await store.KeepTextAsync(records.FixtureText);
            for (int done = 0; done < count; done += Block)
            {
                cancellation.ThrowIfCancellationRequested();
                BoardRecord[] boards = [.. Enumerable.Range(0, Math.Min(Block, count - done)).Select(_ => records.Board())];
                foreach (BoardRecord board in boards)
                {
                    await store.BeginAttemptAsync(RandomRecords.StartOf(board));
                    await attempts.BeginAttemptAsync(RandomRecords.StartOf(board));
                }

                SealedRecord[] ready = Seal(boards, out double milliseconds);
                sealing = Math.Min(sealing, milliseconds);
                (double ownMedian, double rawMedian) = await TakeTurnsAsync(store, inserts, ready);
                ownSeconds = Math.Min(ownSeconds, ownMedian);
                rawSeconds = Math.Min(rawSeconds, rawMedian);
                foreach (BoardRecord board in boards)
                {
                    await store.FinishAttemptAsync(board.AttemptId);
                }
            }

            await store.CheckpointAsync();
        }

        return Report(
            rawSeconds / ownSeconds,
            ownSeconds,
            sealing,
            new FileInfo(own).Length / (double)count,
            Audit.Run(own, null, cancellation).IsClean);
    }

    private static SealedRecord[] Seal(BoardRecord[] boards, out double milliseconds)
    {
        SealedRecord[] ready = [.. boards.Select(SealedRecord.Seal)];
        long start = Stopwatch.GetTimestamp();
        foreach (BoardRecord board in boards)
        {
            SealedRecord.Seal(board);
        }

        milliseconds = Stopwatch.GetElapsedTime(start).TotalMilliseconds / boards.Length;
        return ready;
    }

    // Record by record, so that what else the machine and its disk do hits both alike; who begins changes each time.
    private static async Task<(double OwnMedian, double RawMedian)> TakeTurnsAsync(
        RecordStore store, RawInserts inserts, SealedRecord[] ready)
    {
        var ownSeconds = new List<double>();
        var rawSeconds = new List<double>();
        for (int at = 0; at < ready.Length; at++)
        {
            for (int turn = 0; turn < 2; turn++)
            {
                long start = Stopwatch.GetTimestamp();
                if ((at + turn) % 2 == 0)
                {
                    await store.AppendAsync(ready[at]);
                    ownSeconds.Add(Stopwatch.GetElapsedTime(start).TotalSeconds);
                }
                else
                {
                    inserts.Insert(ready[at]);
                    rawSeconds.Add(Stopwatch.GetElapsedTime(start).TotalSeconds);
                }
            }
        }

        return (Median(ownSeconds), Median(rawSeconds));
    }

    private static int Report(double ratio, double ownSeconds, double sealingMs, double bytes, bool clean)
    {
        Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"""
            append, durable        {1e3 * ownSeconds:F3} ms (median of the best {Block}), {1 / ownSeconds:F0} a second
            over raw inserts       {ratio:F3} of their rate (wanted: at least {RatioWanted})
            sealing                {sealingMs:F3} ms (mean of the best {Block}; wanted: at most {SealingWantedMs})
            file                   {bytes:F0} bytes a board (wanted: at most {BytesWanted})
            audit                  {(clean ? "clean" : "not clean")}
            """));
        return ratio >= RatioWanted && sealingMs <= SealingWantedMs && bytes <= BytesWanted && clean ? 0 : 1;
    }

    private static double Median(IEnumerable<double> values)
    {
        double[] sorted = [.. values.Order()];
        return sorted[sorted.Length / 2];
    }
}
