using Microsoft.Data.Sqlite;

namespace ImpedanceScreen.Records.Auditing;

/// <summary>A record's row as it is stored, nothing believed yet.</summary>
internal sealed record StoredRecord(long Sequence, byte[] Link, byte[] BodyHash, long Crc, byte[] Body, object?[] Columns)
{
    private const int FirstColumn = 5;
    private const int ColumnCount = 7;

    public const string Sql = """
        SELECT sequence, link, body_hash, crc, body, kind, attempt_id, product, serial, attempt, lot, disposition
        FROM record ORDER BY sequence
        """;

    /// <summary>How the row is named to a person: <c>record 17 (board T6-000017)</c>, as the row itself says.</summary>
    public string Name => $"record {Sequence} ({Columns[0]}{(Columns[3] is string serial ? " " + serial : string.Empty)})";

    public static StoredRecord Read(SqliteDataReader reader)
    {
        var columns = new object?[ColumnCount];
        for (int at = 0; at < ColumnCount; at++)
        {
            columns[at] = Cell(reader, FirstColumn + at);
        }

        return new StoredRecord(
            reader.GetInt64(0),
            reader.GetFieldValue<byte[]>(1),
            reader.GetFieldValue<byte[]>(2),
            reader.GetInt64(3),
            reader.GetFieldValue<byte[]>(4),
            columns);
    }

    public static object? Cell(SqliteDataReader reader, int column) =>
        reader.IsDBNull(column) ? null : reader.GetValue(column);

    /// <summary>Whether two column values are the same, byte arrays by their bytes.</summary>
    public static bool Same(object? stored, object? expected) => stored is byte[] left && expected is byte[] right
        ? left.AsSpan().SequenceEqual(right)
        : Equals(stored, expected);
}
