using System.Security.Cryptography;
using System.Text;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Auditing;
using ImpedanceScreen.Records.Storing;
using Microsoft.Data.Sqlite;

namespace ImpedanceScreen.Records;

/// <summary>
/// Reads a whole store, record by record with flat memory, and compares everything in it with everything else. What
/// it cannot
/// tell: changes by someone who holds the station key and rewrites the chain from there on, unless the head was
/// copied elsewhere; rows of attempts that never got a record; whether a recorded attempt's handshake ended, which is
/// noted after its record and outside the chain.
/// </summary>
public static class Audit
{
    // Result codes of SQLite that say nothing about what the file holds.
    private const int Permission = 3;
    private const int Busy = 5;
    private const int CannotOpen = 14;

    /// <summary>Audits a store. Garbage gives findings, never an exception.</summary>
    /// <param name="path">The store's file.</param>
    /// <param name="known">A head noted elsewhere: proves that no tail was cut. Null where there is none.</param>
    /// <param name="cancellation">Ends the audit early.</param>
    /// <exception cref="FileNotFoundException">There is no such file; the message says what to do.</exception>
    /// <exception cref="IOException">The file may not be opened, or another program holds it.</exception>
    /// <exception cref="OperationCanceledException">The caller cancelled.</exception>
    public static AuditReport Run(string path, ChainHead? known = null, CancellationToken cancellation = default)
    {
        StorePath.RequireStore(path);
        var findings = new Findings();
        ChainAudit? chain = null;
        try
        {
            using StoreConnection connection = StoreConnection.OpenReadOnly(path);
            chain = new ChainAudit(findings, new RowAudit(connection, findings), known);
            Check(connection, chain, findings, cancellation);
        }
        catch (SqliteException exception) when (exception.SqliteErrorCode is CannotOpen or Permission or Busy)
        {
            throw new IOException($"{path} cannot be read: {exception.Message}", exception);
        }
        catch (Exception exception) when (exception is SqliteException or InvalidOperationException
            or InvalidCastException or IOException)
        {
            findings.Add($"the store's file is damaged: {exception.Message}");
        }

        return new AuditReport(chain?.Records ?? 0, chain?.Head, findings.Kept, findings.Count);
    }

    private static void Check(
        StoreConnection connection, ChainAudit chain, Findings findings, CancellationToken cancellation)
    {
        // One transaction, so that a station that goes on appending is seen at one moment.
        connection.Execute("BEGIN");
        using (SqliteDataReader reader = connection.Statement(StoredRecord.Sql).ExecuteReader())
        {
            while (reader.Read())
            {
                cancellation.ThrowIfCancellationRequested();
                chain.Follow(StoredRecord.Read(reader));
            }
        }

        chain.End();
        CheckHead(connection, chain.Head, findings);
        CheckTexts(connection, findings, cancellation);
        CheckLoose(connection, findings);
        foreach (string trouble in Column(connection, "PRAGMA quick_check(20)").Where(line => line != "ok"))
        {
            findings.Add($"the store's file is damaged: {trouble}");
        }

        connection.Execute("COMMIT");
    }

    private static void CheckHead(StoreConnection connection, ChainHead? made, Findings findings)
    {
        using SqliteDataReader reader =
            connection.Statement("SELECT sequence, link FROM head ORDER BY id").ExecuteReader();
        if (!reader.Read())
        {
            findings.Add("the head is missing");
            return;
        }

        var head = new ChainHead(reader.GetInt64(0), Convert.ToHexStringLower(reader.GetFieldValue<byte[]>(1)));
        findings.Require(
            head == made, $"the head says record {head.Sequence}, link {head.Link}; the last record is {made?.Sequence}");
    }

    private static void CheckTexts(StoreConnection connection, Findings findings, CancellationToken cancellation)
    {
        using SqliteDataReader reader = connection.Statement("SELECT sha256, content FROM text").ExecuteReader();
        while (reader.Read())
        {
            cancellation.ThrowIfCancellationRequested();
            byte[] named = reader.GetFieldValue<byte[]>(0);
            byte[] made = SHA256.HashData(Encoding.UTF8.GetBytes(reader.GetString(1)));
            findings.Require(
                named.AsSpan().SequenceEqual(made),
                $"file text {Convert.ToHexStringLower(named)}: the text does not match its hash");
        }
    }

    // Rows that hang on no record at all.
    private static void CheckLoose(StoreConnection connection, Findings findings)
    {
        foreach (string sequence in Column(
            connection, "SELECT DISTINCT sequence FROM result WHERE sequence NOT IN (SELECT sequence FROM record)"))
        {
            findings.Add($"result rows of record {sequence}, which is missing");
        }

        foreach (string sequence in Column(
            connection, "SELECT sequence FROM signature WHERE sequence NOT IN (SELECT sequence FROM record)"))
        {
            findings.Add($"a signature of record {sequence}, which is missing");
        }

        foreach (string serial in Column(
            connection,
            """
            SELECT serial FROM attempt a
            WHERE finished <> 0 AND NOT EXISTS (SELECT 1 FROM record r WHERE r.attempt_id = a.attempt_id)
            """))
        {
            findings.Add($"an attempt at board {serial} is finished without a record");
        }
    }

    private static IEnumerable<string> Column(StoreConnection connection, string sql)
    {
        using SqliteDataReader reader = connection.Statement(sql).ExecuteReader();
        while (reader.Read())
        {
            yield return reader.GetString(0);
        }
    }
}
