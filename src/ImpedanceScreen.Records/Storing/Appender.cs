using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Sealing;
using Microsoft.Data.Sqlite;

namespace ImpedanceScreen.Records.Storing;

/// <summary>
/// The one function that appends to a chain. A failure at any step leaves the connection unfit for use: reopen it.
/// </summary>
internal sealed class Appender(StoreConnection connection, StationKey key, AppendSeam seam)
{
    private const string InsertRecordSql = """
        INSERT INTO record
        (sequence, link, body_hash, kind, crc, body, attempt_id, product, serial, attempt, lot, disposition)
        VALUES ($a, $b, $c, $d, $e, $f, $g, $h, $i, $j, $k, $l)
        """;

    private const string InsertResultSql = """
        INSERT INTO result
        (sequence, place, output, state, vth_v, u_vth_v, rth_ohm, u_rth_ohm, correlation, droop, decision, fault)
        VALUES ($a, $b, $c, $d, $e, $f, $g, $h, $i, $j, $k, $l)
        """;

    /// <summary>Appends a sealed record and returns the new head, durable.</summary>
    public ChainHead Append(SealedRecord record)
    {
        (long Sequence, byte[] Link) head = default;
        seam(AppendStep.Begin, () => connection.Execute("BEGIN IMMEDIATE"));
        seam(AppendStep.ReadHead, () => head = ReadHead(connection));
        long sequence = head.Sequence + 1;
        byte[] link = ChainLink.Next(head.Link, sequence, record.BodyHash);
        seam(AppendStep.InsertRecord, () => InsertRecord(sequence, link, record));
        seam(AppendStep.InsertResults, () => InsertResults(sequence, record.Results));
        if (record.Record is LotCloseRecord)
        {
            seam(AppendStep.Sign, () => connection.Execute(
                "INSERT INTO signature (sequence, signature) VALUES ($a, $b)", sequence, key.Sign(link)));
        }

        seam(AppendStep.MoveHead, () => MoveHead(head, sequence, link));
        seam(AppendStep.Commit, () => connection.Execute("COMMIT"));
        return new ChainHead(sequence, Convert.ToHexStringLower(link));
    }

    /// <summary>Writes record 0 and the head into a store that has neither.</summary>
    public void AppendOrigin(SealedRecord record)
    {
        byte[] link = ChainLink.Next(ChainLink.Origin, 0, record.BodyHash);
        connection.Execute("BEGIN IMMEDIATE");
        InsertRecord(0, link, record);
        connection.Execute("INSERT INTO head (id, sequence, link) VALUES (0, 0, $a)", link);
        connection.Execute("COMMIT");
    }

    /// <summary>Reads the head row.</summary>
    /// <exception cref="IOException">There is none.</exception>
    public static (long Sequence, byte[] Link) ReadHead(StoreConnection connection)
    {
        using SqliteDataReader reader =
            connection.Statement("SELECT sequence, link FROM head WHERE id = 0").ExecuteReader();
        return reader.Read()
            ? (reader.GetInt64(0), reader.GetFieldValue<byte[]>(1))
            : throw new IOException("The store has no head. Audit it, and restore it from its last good copy.");
    }

    private void InsertRecord(long sequence, byte[] link, SealedRecord record)
    {
        RecordColumns columns = RecordColumns.Of(record.Record);
        connection.Execute(
            InsertRecordSql,
            sequence,
            link,
            record.BodyHash,
            columns.Kind,
            (long)record.Crc,
            record.Packed,
            columns.AttemptId,
            columns.Product,
            columns.Serial,
            columns.Attempt,
            columns.Lot,
            columns.Disposition);
    }

    private void InsertResults(long sequence, IReadOnlyList<ResultRow> rows)
    {
        for (int place = 0; place < rows.Count; place++)
        {
            ResultRow row = rows[place];
            connection.Execute(
                InsertResultSql,
                sequence,
                (long)place,
                row.Output,
                row.State,
                row.SourceVoltageVolt,
                row.SourceVoltageUncertaintyVolt,
                row.InternalResistanceOhm,
                row.InternalResistanceUncertaintyOhm,
                row.Correlation,
                row.Droop,
                row.Decision,
                row.Fault);
        }
    }

    private void MoveHead((long Sequence, byte[] Link) read, long sequence, byte[] link)
    {
        int moved = connection.Execute(
            "UPDATE head SET sequence = $a, link = $b WHERE id = 0 AND sequence = $c AND link = $d",
            sequence,
            link,
            read.Sequence,
            read.Link);
        if (moved != 1)
        {
            throw new IOException("The head of the chain moved within a transaction.");
        }
    }
}
