using ImpedanceScreen.Records.Sealing;
using ImpedanceScreen.Records.Storing;

namespace ImpedanceScreen.Benchmarks.Records;

/// <summary>
/// The least that keeps a record durable: the same rows into the same tables with the same pragmas, one transaction a
/// record, on one connection, on the caller's thread; no head is read, no link made, nothing looked up.
/// </summary>
internal sealed class RawInserts : IDisposable
{
    private const string RecordSql = """
        INSERT INTO record
        (sequence, link, body_hash, kind, crc, body, attempt_id, product, serial, attempt, lot, disposition)
        VALUES ($a, $b, $c, $d, $e, $f, $g, $h, $i, $j, $k, $l)
        """;

    private const string ResultSql = """
        INSERT INTO result
        (sequence, place, output, state, vth_v, u_vth_v, rth_ohm, u_rth_ohm, correlation, droop, decision, fault)
        VALUES ($a, $b, $c, $d, $e, $f, $g, $h, $i, $j, $k, $l)
        """;

    private readonly StoreConnection connection;
    private long sequence;

    /// <param name="path">An existing store; nothing else may write to it.</param>
    public RawInserts(string path) => connection = StoreConnection.Open(path);

    public void Insert(SealedRecord record)
    {
        sequence++;
        connection.Execute("BEGIN IMMEDIATE");
        RecordColumns columns = RecordColumns.Of(record.Record);
        connection.Execute(
            RecordSql, sequence, record.BodyHash, record.BodyHash, columns.Kind, (long)record.Crc, record.Packed,
            columns.AttemptId, columns.Product, columns.Serial, columns.Attempt, columns.Lot, columns.Disposition);
        long place = 0;
        foreach (ResultRow row in record.Results)
        {
            connection.Execute(
                ResultSql, sequence, place++, row.Output, row.State, row.SourceVoltageVolt,
                row.SourceVoltageUncertaintyVolt, row.InternalResistanceOhm, row.InternalResistanceUncertaintyOhm,
                row.Correlation, row.Droop, row.Decision, row.Fault);
        }

        connection.Execute("COMMIT");
    }

    public void Dispose() => connection.Dispose();
}
