using System.Collections.Concurrent;
using ImpedanceScreen.Files;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Sealing;
using ImpedanceScreen.Records.Storing;

namespace ImpedanceScreen.Records;

/// <summary>
/// A station's records in one SQLite file with a key file beside it. Any process of the station may have it open; each
/// append takes the head from its own transaction. Safe for any thread.
/// </summary>
public sealed class RecordStore : IRecordStore
{
    private readonly WriterThread writer = new("record store");
    private readonly ConcurrentDictionary<string, byte> keptTexts = new(StringComparer.Ordinal);
    private readonly StoreSession session;
    private readonly StationKey key;
    private volatile ChainHead head;

    private RecordStore(StoreSession session, StationKey key, StoreRecord origin, ChainHead head)
    {
        this.session = session;
        this.key = key;
        this.head = head;
        Station = origin.Station;
    }

    /// <inheritdoc/>
    public string Station { get; }

    /// <summary>The head as this process last saw it: at opening, and after each of its appends.</summary>
    public ChainHead Head => head;

    /// <summary>
    /// Makes a store, its station key (<c>FILE.key</c>, mode 0600) and record 0, all durable. Nothing else ever makes
    /// one.
    /// </summary>
    /// <param name="path">The store's file; neither it nor its key may exist.</param>
    /// <param name="station">The station's name.</param>
    /// <param name="programVersion">Version of the program.</param>
    /// <param name="time">Clock for record 0.</param>
    /// <exception cref="IOException">A file is there already, or cannot be written; the message says what to
    /// do.</exception>
    public static void Create(string path, string station, string programVersion, TimeProvider time) =>
        StoreCreation.Create(path, station, programVersion, time);

    /// <summary>Opens a store.</summary>
    /// <exception cref="FileNotFoundException">There is none; the message says how to make one.</exception>
    /// <exception cref="IOException">It lies on a network, its key is missing, or head and records do not
    /// fit.</exception>
    /// <exception cref="InvalidOperationException">The file is no record store of this version.</exception>
    public static RecordStore Open(string path) => Open(path, (_, action) => action());

    /// <inheritdoc cref="Open(string)"/>
    internal static RecordStore Open(string path, AppendSeam seam)
    {
        StorePath.RequireStore(path);
        StationKey? read = null;
        StoreSession? opened = null;
        try
        {
            read = StationKey.Read(StorePath.KeyOf(path));
            opened = new StoreSession(path, read, seam);
            StoreRecord origin = StoreStart.RequireFit(opened.Connection, read, path, out ChainHead last);
            return new RecordStore(opened, read, origin, opened.Seen(last));
        }
        catch (Exception exception)
        {
            opened?.Dispose();
            read?.Dispose();
            if (exception is Microsoft.Data.Sqlite.SqliteException or FormatException or InvalidDataException)
            {
                throw new IOException(
                    $"The record store '{path}' cannot be read: {exception.Message} Audit it, and restore it from its "
                    + "last good copy.",
                    exception);
            }

            throw;
        }
    }

    /// <inheritdoc/>
    public Task KeepTextAsync(FileText text)
    {
        ArgumentNullException.ThrowIfNull(text);
        return RunAsync(connection =>
        {
            connection.Execute(
                "INSERT INTO text (sha256, content) VALUES ($a, $b) ON CONFLICT DO NOTHING",
                Convert.FromHexString(text.Sha256),
                text.Text);
            return keptTexts.TryAdd(text.Sha256, 0);
        });
    }

    /// <inheritdoc/>
    public Task BeginAttemptAsync(AttemptStart attempt)
    {
        ArgumentNullException.ThrowIfNull(attempt);
        return RunAsync(connection =>
        {
            StoreQueries.Insert(connection, attempt);
            return true;
        });
    }

    /// <inheritdoc/>
    public Task<ChainHead> AppendAsync(Record record)
    {
        ArgumentNullException.ThrowIfNull(record);
        SealedRecord ready;
        try
        {
            ready = SealedRecord.Seal(record);
        }
        catch (ArgumentException exception)
        {
            return Task.FromException<ChainHead>(
                new StoreFaultException($"The record cannot be sealed: {exception.Message}", exception));
        }

        return AppendAsync(ready);
    }

    /// <summary>Appends a record that is sealed already.</summary>
    internal Task<ChainHead> AppendAsync(SealedRecord record) => RunAsync(connection =>
    {
        if (record.Board is { } board)
        {
            RequireText(connection, board.LimitFileSha256);
            RequireText(connection, board.FixtureFileSha256);
        }

        return head = session.Append(record);
    });

    /// <inheritdoc/>
    public Task FinishAttemptAsync(Guid attemptId) => RunAsync(connection =>
        connection.Execute("UPDATE attempt SET finished = 1 WHERE attempt_id = $a", RecordColumns.Bytes(attemptId)) == 1
            ? true
            : throw new InvalidOperationException($"Attempt {attemptId} never began."));

    /// <inheritdoc/>
    public Task<IReadOnlyList<UnfinishedAttempt>> UnfinishedAttemptsAsync(string fixture) =>
        RunAsync(connection => StoreQueries.Unfinished(connection, fixture));

    /// <inheritdoc/>
    public Task<IReadOnlyList<RecordedAttempt>> AttemptsAsync(string product, string serial) =>
        RunAsync(connection => StoreQueries.Attempts(connection, product, serial));

    /// <inheritdoc/>
    public Task<LotCounts> CountLotAsync(string lot) =>
        RunAsync(connection => StoreQueries.CountLot(connection, lot));

    /// <inheritdoc/>
    /// <remarks>Moves the write-ahead log into the file and cuts it.</remarks>
    public Task CheckpointAsync() => RunAsync(connection => connection.Pragma("wal_checkpoint(TRUNCATE)"));

    /// <summary>Works off what is under way and closes the file.</summary>
    public async ValueTask DisposeAsync()
    {
        await writer.DisposeAsync();
        session.Dispose();
        key.Dispose();
    }

    private Task<T> RunAsync<T>(Func<StoreConnection, T> job) => writer.RunAsync(() =>
    {
        try
        {
            return job(session.Connection);
        }
        catch (Exception exception) when (StoreSession.IsStoreTrouble(exception))
        {
            session.Dispose();
            throw new StoreFaultException($"The record store does not answer: {exception.Message}", exception);
        }
    });

    // A record that names a text nobody kept could never be judged again.
    private void RequireText(StoreConnection connection, string sha256)
    {
        if (keptTexts.ContainsKey(sha256))
        {
            return;
        }

        long found = (long)(connection.Scalar(
            "SELECT count(*) FROM text WHERE sha256 = $a", Convert.FromHexString(sha256)) ?? 0L);
        if (found == 0)
        {
            throw new StoreFaultException($"The record names a file text {sha256} that was never kept.");
        }

        keptTexts.TryAdd(sha256, 0);
    }
}
