using ImpedanceScreen.Recording;
using ImpedanceScreen.Records;
using ImpedanceScreen.Records.Auditing;
using ImpedanceScreen.Records.Storing;
using ImpedanceScreen.Tests.Records.Shared;
using Microsoft.Data.Sqlite;
using Record = ImpedanceScreen.Recording.Record;

namespace ImpedanceScreen.Tests.Records;

/// <summary>
/// Every step of an append fails: before it was done or after, once or twice, with or without a new start.
/// </summary>
public sealed class AppendFaultTests : IDisposable
{
    private readonly string folder = Directory.CreateTempSubdirectory("faults").FullName;

    private string StoreFile => Path.Combine(folder, "line-3.store");

    public static TheoryData<string, bool, int, bool> Table()
    {
        var table = new TheoryData<string, bool, int, bool>();
        foreach (string step in Enum.GetNames<AppendStep>())
        {
            foreach (bool applied in new[] { false, true })
            {
                table.Add(step, applied, 1, false);
                table.Add(step, applied, 2, false);
                table.Add(step, applied, 2, true);
            }
        }

        return table;
    }

    public void Dispose() => Directory.Delete(folder, recursive: true);

    [Theory]
    [MemberData(nameof(Table))]
    public async Task A_failing_step_never_gives_a_second_record_nor_loses_one(
        string step, bool applied, int times, bool restart)
    {
        AppendStep failing = Enum.Parse<AppendStep>(step);
        var random = new RandomRecords(31);
        BoardRecord board = random.Board();
        LotCloseRecord close = random.LotClose();
        await MakeAsync(random, board);
        foreach (Record record in failing == AppendStep.Sign ? new Record[] { close } : [board, close])
        {
            // A second failure holds, except where the first one was only reported: then the record is found.
            bool progress = times == 1 || (failing == AppendStep.Commit && applied);
            int failures = times;
            ChainHead? acknowledged = null;
            long before;
            await using (RecordStore store = RecordStore.Open(StoreFile, Seam))
            {
                before = store.Head.Sequence;
                if (progress)
                {
                    acknowledged = await store.AppendAsync(record);
                }
                else
                {
                    await Assert.ThrowsAsync<StoreFaultException>(() => store.AppendAsync(record));
                }
            }

            AuditReport report = Audit.Run(StoreFile, acknowledged);
            Assert.Empty(report.Findings);
            Assert.Equal(progress ? before + 1 : before, report.Head?.Sequence);
            if (restart || !progress)
            {
                await AppendAnewAsync(record, before + 1, progress);
            }

            void Seam(AppendStep at, Action action)
            {
                bool fails = at == failing && failures-- > 0;
                if (!fails || applied)
                {
                    action();
                }

                if (fails)
                {
                    throw new SqliteException("disk I/O error", 10);
                }
            }
        }
    }

    [Fact]
    public async Task Another_body_for_the_same_attempt_is_held_even_when_a_commit_failed()
    {
        var random = new RandomRecords(32);
        BoardRecord board = random.Board();
        await MakeAsync(random, board);
        bool failed = false;
        await using RecordStore store = RecordStore.Open(StoreFile, (step, action) =>
        {
            action();
            if (step == AppendStep.Commit && !failed)
            {
                failed = true;
                throw new IOException("the disk went away");
            }
        });
        ChainHead head = await store.AppendAsync(board);
        await Assert.ThrowsAsync<StoreFaultException>(() => store.AppendAsync(board with { Cause = "another" }));
        Assert.Empty(Audit.Run(StoreFile, head).Findings);
    }

    // A station that starts again asks first what the store holds, as the bench does; a board's record comes once at
    // most.
    private async Task AppendAnewAsync(Record record, long expected, bool there)
    {
        await using RecordStore store = RecordStore.Open(StoreFile);
        if (record is BoardRecord board)
        {
            UnfinishedAttempt left = Assert.Single(await store.UnfinishedAttemptsAsync(board.Fixture));
            Assert.Equal(there ? board.Disposition : null, left.Recorded);
            Assert.Equal(expected, (await store.AppendAsync(board)).Sequence);
            Assert.Single(await store.AttemptsAsync(board.Product, board.Serial));
        }
        else if (!there)
        {
            Assert.Equal(expected, (await store.AppendAsync(record)).Sequence);
        }

        Assert.Empty(Audit.Run(StoreFile, store.Head).Findings);
    }

    private async Task MakeAsync(RandomRecords random, BoardRecord board)
    {
        RecordStore.Create(StoreFile, "line-3", "0.1.0", TimeProvider.System);
        await using RecordStore store = RecordStore.Open(StoreFile);
        await store.KeepTextAsync(random.LimitText);
        await store.KeepTextAsync(random.FixtureText);
        await store.BeginAttemptAsync(RandomRecords.StartOf(board));
    }
}
