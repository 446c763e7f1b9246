using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Bodies;
using ImpedanceScreen.Records.Sealing;
using Microsoft.Data.Sqlite;

namespace ImpedanceScreen.Records.Storing;

/// <summary>What a station asks of its store, answered from the narrow columns.</summary>
internal static class StoreQueries
{
    private const string CountLotSql = """
        WITH board AS (SELECT product, serial, disposition, sequence FROM record WHERE lot = $a AND kind = 'board'),
        last AS (
            SELECT disposition, row_number() OVER (PARTITION BY product, serial ORDER BY sequence DESC) AS back
            FROM board WHERE disposition <> 'aborted')
        SELECT
            (SELECT count(*) FROM (SELECT DISTINCT product, serial FROM board)),
            count(*) FILTER (WHERE disposition = 'pass'),
            count(*) FILTER (WHERE disposition = 'fail'),
            count(*) FILTER (WHERE disposition = 'retest'),
            (SELECT count(*) FROM board WHERE disposition = 'aborted')
        FROM last WHERE back = 1
        """;

    public static void Insert(StoreConnection connection, AttemptStart attempt) => connection.Execute(
        "INSERT INTO attempt (attempt_id, product, serial, lot, fixture, started_ticks) VALUES ($a, $b, $c, $d, $e, $f)",
        RecordColumns.Bytes(attempt.AttemptId),
        attempt.Product,
        attempt.Serial,
        attempt.Lot,
        attempt.Fixture,
        attempt.StartedAt.UtcTicks);

    public static IReadOnlyList<UnfinishedAttempt> Unfinished(StoreConnection connection, string fixture)
    {
        using SqliteDataReader reader = connection.Statement(
            """
            SELECT a.attempt_id, a.product, a.serial, a.lot, a.fixture, a.started_ticks, r.disposition
            FROM attempt a LEFT JOIN record r ON r.attempt_id = a.attempt_id
            WHERE a.fixture = $a AND a.finished = 0 ORDER BY a.started_ticks
            """,
            fixture).ExecuteReader();
        var found = new List<UnfinishedAttempt>();
        while (reader.Read())
        {
            var start = new AttemptStart(
                Identifier(reader),
                reader.GetString(1),
                reader.GetString(2),
                OptionalText(reader, 3),
                reader.GetString(4),
                new DateTimeOffset(reader.GetInt64(5), TimeSpan.Zero));
            found.Add(new UnfinishedAttempt(
                start, OptionalText(reader, 6) is { } word ? Words<Disposition>.Parse(word) : null));
        }

        return found;
    }

    public static IReadOnlyList<RecordedAttempt> Attempts(StoreConnection connection, string product, string serial)
    {
        using SqliteDataReader reader = connection.Statement(
            """
            SELECT attempt_id, sequence, attempt, lot, disposition FROM record
            WHERE serial = $a AND product = $b ORDER BY sequence
            """,
            serial,
            product).ExecuteReader();
        var found = new List<RecordedAttempt>();
        while (reader.Read())
        {
            found.Add(new RecordedAttempt(
                Identifier(reader),
                reader.GetInt64(1),
                reader.GetInt32(2),
                OptionalText(reader, 3),
                Words<Disposition>.Parse(reader.GetString(4))));
        }

        return found;
    }

    public static LotCounts CountLot(StoreConnection connection, string lot)
    {
        using SqliteDataReader reader = connection.Statement(CountLotSql, lot).ExecuteReader();
        reader.Read();
        return new LotCounts(
            reader.GetInt32(0), reader.GetInt32(1), reader.GetInt32(2), reader.GetInt32(3), reader.GetInt32(4));
    }

    private static Guid Identifier(SqliteDataReader reader) => new(reader.GetFieldValue<byte[]>(0), bigEndian: true);

    private static string? OptionalText(SqliteDataReader reader, int column) =>
        reader.IsDBNull(column) ? null : reader.GetString(column);
}
