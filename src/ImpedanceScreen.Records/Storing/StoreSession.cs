using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Sealing;
using Microsoft.Data.Sqlite;

namespace ImpedanceScreen.Records.Storing;

/// <summary>
/// The writer's connection, replaced whole whenever an append failed: what such a connection still holds is unknown.
/// For
/// the writer thread only.
/// </summary>
internal sealed class StoreSession(string path, StationKey key, AppendSeam seam) : IDisposable
{
    private StoreConnection? connection;
    private long seen;

    /// <summary>The connection, opened where there is none.</summary>
    public StoreConnection Connection => connection ??= StoreConnection.Open(path);

    /// <summary>The head as last seen: a record of this process that is looked for stands behind it.</summary>
    public ChainHead Seen(ChainHead head)
    {
        seen = head.Sequence;
        return head;
    }

    /// <summary>Appends a sealed record; a commit of unknown outcome is cleared up by looking for the record.</summary>
    /// <exception cref="StoreFaultException">It is not in the store, or nobody can say.</exception>
    public ChainHead Append(SealedRecord record)
    {
        try
        {
            return Seen(new Appender(Connection, key, seam).Append(record));
        }
        catch (Exception first) when (IsStoreTrouble(first))
        {
            return Recover(record);
        }
    }

    /// <inheritdoc/>
    public void Dispose() => Close();

    /// <summary>Whether an exception comes from store or disk rather than from a mistake of the program.</summary>
    public static bool IsStoreTrouble(Exception exception) =>
        exception is SqliteException or IOException or UnauthorizedAccessException;

    private ChainHead Recover(SealedRecord record)
    {
        Close();
        try
        {
            // Looked for on a new connection: what it sees is what the disk holds. Absent: the same bytes once more.
            return Seen(Find(record) ?? new Appender(Connection, key, seam).Append(record));
        }
        catch (Exception second) when (IsStoreTrouble(second))
        {
            Close();
            throw Fault(second);
        }
    }

    private ChainHead? Find(SealedRecord record)
    {
        using SqliteDataReader reader = record.Board is { } board
            ? Connection.Statement(
                "SELECT sequence, link, body_hash FROM record WHERE attempt_id = $a",
                RecordColumns.Bytes(board.AttemptId)).ExecuteReader()
            : Connection.Statement(
                "SELECT sequence, link, body_hash FROM record WHERE sequence > $a AND body_hash = $b",
                seen,
                record.BodyHash).ExecuteReader();
        if (!reader.Read())
        {
            return null;
        }

        return reader.GetFieldValue<byte[]>(2).AsSpan().SequenceEqual(record.BodyHash)
            ? new ChainHead(reader.GetInt64(0), Convert.ToHexStringLower(reader.GetFieldValue<byte[]>(1)))
            : throw new StoreFaultException(
                $"Attempt {record.Board?.AttemptId} has another record already (sequence {reader.GetInt64(0)}). "
                + "Do not sort the board; audit the store.");
    }

    private void Close()
    {
        connection?.Dispose();
        connection = null;
    }

    private static StoreFaultException Fault(Exception cause) => new(
        $"The record could not be made durable: {cause.Message} Do not sort the board; look at the store's disk, then "
        + "audit the store.",
        cause);
}
