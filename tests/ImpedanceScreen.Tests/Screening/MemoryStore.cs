using ImpedanceScreen.Files;
using ImpedanceScreen.Recording;
using Record = ImpedanceScreen.Recording.Record;

namespace ImpedanceScreen.Tests.Screening;

/// <summary>Records in memory: notes what becomes durable among the events of the bench.</summary>
internal sealed class MemoryStore(List<string> events) : IRecordStore
{
    public List<Record> Records { get; } = [];

    public List<UnfinishedAttempt> Unfinished { get; } = [];

    public Func<Record, Exception?> Fault { get; set; } = _ => null;

    public string Station => "test-station";

    public ChainHead Head => new(Records.Count, new string('0', 64));

    public Task KeepTextAsync(FileText text) => Task.CompletedTask;

    public Task BeginAttemptAsync(AttemptStart attempt)
    {
        events.Add($"begin {attempt.Serial}");
        Unfinished.Add(new UnfinishedAttempt(attempt, null));
        return Task.CompletedTask;
    }

    public Task<ChainHead> AppendAsync(Record record)
    {
        if (Fault(record) is { } fault)
        {
            return Task.FromException<ChainHead>(fault);
        }

        events.Add(record is BoardRecord board ? $"record {board.Serial} {board.Disposition}" : $"record {record.Kind}");
        Records.Add(record);
        return Task.FromResult(Head);
    }

    public Task FinishAttemptAsync(Guid attemptId)
    {
        events.Add("finish");
        Unfinished.RemoveAll(attempt => attempt.Start.AttemptId == attemptId);
        return Task.CompletedTask;
    }

    public Task<IReadOnlyList<UnfinishedAttempt>> UnfinishedAttemptsAsync(string fixture) =>
        Task.FromResult<IReadOnlyList<UnfinishedAttempt>>([.. Unfinished]);

    public Task<IReadOnlyList<RecordedAttempt>> AttemptsAsync(string product, string serial) =>
        Task.FromResult<IReadOnlyList<RecordedAttempt>>(
        [
            .. Records.OfType<BoardRecord>().Where(board => board.Product == product && board.Serial == serial)
                .Select(board => new RecordedAttempt(board.AttemptId, 1, board.Attempt, board.Lot, board.Disposition)),
        ]);

    public Task<LotCounts> CountLotAsync(string lot) => Task.FromResult(new LotCounts(0, 0, 0, 0, 0));

    public Task CheckpointAsync() => Task.CompletedTask;

    public ValueTask DisposeAsync() => ValueTask.CompletedTask;
}
