using ImpedanceScreen.Files;

namespace ImpedanceScreen.Recording;

/// <summary>
/// A station's records. Calls may come from any thread; one writer works them off in order. When a task completes,
/// what it wrote is
/// durable.
/// </summary>
public interface IRecordStore : IAsyncDisposable
{
    /// <summary>The station's name from record 0.</summary>
    string Station { get; }

    /// <summary>The head of the chain.</summary>
    ChainHead Head { get; }

    /// <summary>Keeps a file's text by its hash, once.</summary>
    Task KeepTextAsync(FileText text);

    /// <summary>Commits the row of an attempt before the board is touched.</summary>
    Task BeginAttemptAsync(AttemptStart attempt);

    /// <summary>
    /// Seals and appends a record, a board's record once an attempt.
    /// </summary>
    /// <exception cref="StoreFaultException">The record is not in the store; nothing may be sorted.</exception>
    Task<ChainHead> AppendAsync(Record record);

    /// <summary>Notes that the handshake of an attempt came to its end (or that there is none).</summary>
    Task FinishAttemptAsync(Guid attemptId);

    /// <summary>Attempts begun on this fixture whose handshake did not come to its end, oldest first.</summary>
    Task<IReadOnlyList<UnfinishedAttempt>> UnfinishedAttemptsAsync(string fixture);

    /// <summary>All recorded attempts at a serial number of a product, oldest first.</summary>
    Task<IReadOnlyList<RecordedAttempt>> AttemptsAsync(string product, string serial);

    /// <summary>Counts of a lot by the last disposition of each board, and aborted attempts.</summary>
    Task<LotCounts> CountLotAsync(string lot);

    /// <summary>
    /// Brings the files of the store to rest between lots, so that what is appended beside them does not grow for ever.
    /// </summary>
    /// <exception cref="StoreFaultException">The store cannot be written.</exception>
    Task CheckpointAsync();
}

/// <summary>The head of a record chain.</summary>
/// <param name="Sequence">Sequence number of the last record; record 0 is the store's own.</param>
/// <param name="Link">Its link, lower-case hexadecimal.</param>
public sealed record ChainHead(long Sequence, string Link);

/// <summary>An attempt as it begins.</summary>
/// <param name="AttemptId">Its identifier.</param>
/// <param name="Product">Product.</param>
/// <param name="Serial">Serial number.</param>
/// <param name="Lot">Lot; null where none.</param>
/// <param name="Fixture">Fixture name.</param>
/// <param name="StartedAt">UTC.</param>
public sealed record AttemptStart(
    Guid AttemptId, string Product, string Serial, string? Lot, string Fixture, DateTimeOffset StartedAt);

/// <summary>An attempt whose handshake did not come to its end.</summary>
/// <param name="Start">How it began.</param>
/// <param name="Recorded">Its disposition where it has a record; null where it has none.</param>
public sealed record UnfinishedAttempt(AttemptStart Start, Disposition? Recorded);

/// <summary>An attempt with its record.</summary>
/// <param name="AttemptId">Its identifier.</param>
/// <param name="Sequence">Sequence number of its record.</param>
/// <param name="Attempt">Its number at the serial number.</param>
/// <param name="Lot">Its lot; null where none.</param>
/// <param name="Disposition">What happened to the board.</param>
public sealed record RecordedAttempt(Guid AttemptId, long Sequence, int Attempt, string? Lot, Disposition Disposition);

/// <summary>Counts of a lot.</summary>
/// <param name="Boards">Serial numbers with at least one record.</param>
/// <param name="Passed">By last disposition that is not aborted: pass.</param>
/// <param name="Failed">Fail.</param>
/// <param name="Retest">Retest.</param>
/// <param name="Aborted">Attempts aborted.</param>
public sealed record LotCounts(int Boards, int Passed, int Failed, int Retest, int Aborted);

/// <summary>A record could not be made durable; its outcome is known to be <em>not written</em>, or unknown.</summary>
public sealed class StoreFaultException : Exception
{
    /// <summary>Makes the exception.</summary>
    /// <param name="message">What happened and what to look at, for a person.</param>
    /// <param name="inner">What caused it.</param>
    public StoreFaultException(string message, Exception? inner = null)
        : base(message, inner)
    {
    }
}
