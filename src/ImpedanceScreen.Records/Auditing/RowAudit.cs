using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Sealing;
using ImpedanceScreen.Records.Storing;
using Microsoft.Data.Sqlite;

namespace ImpedanceScreen.Records.Auditing;

/// <summary>
/// Compares the rows that hang on a record with its body: columns, results, attempt, texts, signature.
/// </summary>
internal sealed class RowAudit(StoreConnection connection, Findings findings)
{
    private static readonly string[] ColumnNames =
        ["kind", "attempt_id", "product", "serial", "attempt", "lot", "disposition"];

    private static readonly string[] ResultNames =
    [
        "place", "output", "state", "vth_v", "u_vth_v", "rth_ohm", "u_rth_ohm", "correlation", "droop", "decision", "fault",
    ];

    private string? publicKey;

    public void Check(StoredRecord row, Record record)
    {
        RecordColumns columns = RecordColumns.Of(record);
        Compare(
            row.Name,
            ColumnNames,
            row.Columns,
            [columns.Kind, columns.AttemptId, columns.Product, columns.Serial, columns.Attempt, columns.Lot,
                columns.Disposition]);
        CheckResults(row, ResultRow.AllOf(record));
        CheckSignature(row, record is LotCloseRecord);
        if (record is StoreRecord store)
        {
            findings.Require(row.Sequence == 0, $"{row.Name}: a second record of the store itself");
            publicKey ??= store.PublicKey;
        }

        if (record is BoardRecord board)
        {
            CheckAttempt(row.Name, board);
            CheckText(row.Name, board.LimitFileSha256);
            CheckText(row.Name, board.FixtureFileSha256);
        }
    }

    private void CheckResults(StoredRecord row, IReadOnlyList<ResultRow> expected)
    {
        using SqliteDataReader reader = connection.Statement(
            $"SELECT {string.Join(", ", ResultNames)} FROM result WHERE sequence = $a ORDER BY place",
            row.Sequence).ExecuteReader();
        int place = 0;
        while (reader.Read())
        {
            if (place < expected.Count)
            {
                Compare($"{row.Name}: result {place}", ResultNames, Cells(reader), Values(place, expected[place]));
            }

            place++;
        }

        findings.Require(
            place == expected.Count, $"{row.Name}: {place} result rows where the body has {expected.Count}");
    }

    private static object?[] Values(int place, ResultRow row) =>
    [
        (long)place, row.Output, row.State, row.SourceVoltageVolt, row.SourceVoltageUncertaintyVolt,
        row.InternalResistanceOhm, row.InternalResistanceUncertaintyOhm, row.Correlation, row.Droop, row.Decision, row.Fault,
    ];

    private void CheckAttempt(string name, BoardRecord board)
    {
        using SqliteDataReader reader = connection.Statement(
            "SELECT product, serial, lot, fixture, started_ticks FROM attempt WHERE attempt_id = $a",
            RecordColumns.Bytes(board.AttemptId)).ExecuteReader();
        if (!reader.Read())
        {
            findings.Add($"{name}: its attempt {board.AttemptId} is missing");
            return;
        }

        Compare(
            $"{name}: attempt",
            ["product", "serial", "lot", "fixture", "started_ticks"],
            Cells(reader),
            [board.Product, board.Serial, board.Lot, board.Fixture, board.StartedAt.UtcTicks]);
    }

    private void CheckText(string name, string sha256) => findings.Require(
        connection.Scalar("SELECT 1 FROM text WHERE sha256 = $a", Convert.FromHexString(sha256)) is not null,
        $"{name}: the file text {sha256} that it names is missing");

    private void CheckSignature(StoredRecord row, bool due)
    {
        object? signature = connection.Scalar("SELECT signature FROM signature WHERE sequence = $a", row.Sequence);
        if (!due)
        {
            findings.Require(signature is null, $"{row.Name}: a signature where none is due");
            return;
        }

        findings.Require(
            signature is byte[] bytes && publicKey is not null && StationKey.Verify(publicKey, row.Link, bytes),
            signature is null ? $"{row.Name}: its signature is missing" : $"{row.Name}: its signature does not fit");
    }

    private void Compare(string name, string[] names, object?[] stored, object?[] expected)
    {
        for (int at = 0; at < names.Length; at++)
        {
            findings.Require(
                StoredRecord.Same(stored[at], expected[at]), $"{name}: column {names[at]} is not what the body says");
        }
    }

    private static object?[] Cells(SqliteDataReader reader)
    {
        var cells = new object?[reader.FieldCount];
        for (int at = 0; at < cells.Length; at++)
        {
            cells[at] = StoredRecord.Cell(reader, at);
        }

        return cells;
    }
}
