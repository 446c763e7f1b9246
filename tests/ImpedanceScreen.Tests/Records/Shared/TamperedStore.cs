using System.Globalization;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records;
using ImpedanceScreen.Records.Auditing;
using Microsoft.Data.Sqlite;

namespace ImpedanceScreen.Tests.Records.Shared;

/// <summary>One tampering as it was done.</summary>
/// <param name="What">In words.</param>
/// <param name="Named">One of these texts must stand in the first finding.</param>
public sealed record Tampering(string What, params string[] Named);

/// <summary>A store, and copies of it that somebody tampered with behind the program's back.</summary>
public sealed class TamperedStore : IDisposable
{
    private const int Boards = 14;

    private readonly string folder = Directory.CreateTempSubdirectory("tamper").FullName;

    private TamperedStore()
    {
    }

    public ChainHead Head { get; private set; } = new(0, string.Empty);

    private string Original => Path.Combine(folder, "original.store");

    private string Copy => Path.Combine(folder, "copy.store");

    public static async Task<TamperedStore> MakeAsync(int seed)
    {
        var made = new TamperedStore();
        RecordStore.Create(made.Original, "line-3", "0.1.0", TimeProvider.System);
        var records = new RandomRecords(seed);
        await using RecordStore store = RecordStore.Open(made.Original);
        await store.KeepTextAsync(records.LimitText);
        await store.KeepTextAsync(records.FixtureText);
        for (int board = 0; board < Boards; board++)
        {
            BoardRecord record = records.Board();
            await store.BeginAttemptAsync(RandomRecords.StartOf(record));
            made.Head = await store.AppendAsync(record);
            await store.FinishAttemptAsync(record.AttemptId);
        }

        await store.AppendAsync(records.Hold());
        made.Head = await store.AppendAsync(records.LotClose());
        return made;
    }

    /// <summary>The report on the store itself, which must be clean.</summary>
    public AuditReport AuditOriginal() => Audit.Run(Original, Head);

    /// <summary>Tampers with a fresh copy and audits it.</summary>
    public (Tampering Done, AuditReport Report) Try(Random random)
    {
        File.Copy(Original, Copy, overwrite: true);
        Tampering done;
        using (var connection = new SqliteConnection($"Data Source={Copy};Pooling=False;Foreign Keys=False"))
        {
            connection.Open();
            done = new Tamperer(connection, random, Head.Sequence).Tamper();
        }

        return (done, Audit.Run(Copy, Head));
    }

    /// <summary>Whether the audit found it and its first finding names it.</summary>
    public static bool Found(Tampering done, AuditReport report) => !report.IsClean
        && done.Named.Any(name => report.Findings[0].Contains(name, StringComparison.Ordinal));

    public void Dispose() => Directory.Delete(folder, recursive: true);
}

/// <summary>Does one random tampering.</summary>
internal sealed class Tamperer(SqliteConnection connection, Random random, long last)
{
    private static readonly string[] ResultColumns =
        ["output", "state", "vth_v", "u_vth_v", "rth_ohm", "u_rth_ohm", "correlation", "droop", "decision", "fault"];

    private static readonly string[] RecordColumns =
        ["kind", "product", "serial", "attempt", "lot", "disposition", "crc", "attempt_id"];

    private static readonly string[] AttemptColumns = ["product", "serial", "lot", "fixture", "started_ticks"];

    public Tampering Tamper() => random.Next(13) switch
    {
        0 or 1 => ChangeByte("body", random.NextInt64(last + 1)),
        2 => ChangeByte(random.Next(2) == 0 ? "link" : "body_hash", random.NextInt64(last + 1)),
        3 => Remove(),
        4 => Swap(),
        5 => Insert(),
        6 => ChangeColumn("result", "sequence", ResultColumns, $"AND place = {random.Next(RandomRecords.Outputs)}"),
        7 => ChangeColumn("record", "sequence", RecordColumns, string.Empty),
        8 => ChangeAttempt(),
        9 => ChangeText(),
        10 => ChangeHead(),
        11 => CutTail(),
        _ => LoseRow(),
    };

    private static string Name(long sequence) => string.Create(CultureInfo.InvariantCulture, $"record {sequence} ");

    private long AnyBoard() => 1 + random.NextInt64(last - 2);

    private Tampering ChangeByte(string column, long sequence)
    {
        byte[] bytes = (byte[])Scalar($"SELECT {column} FROM record WHERE sequence = {sequence}")!;
        int at = random.Next(bytes.Length);
        bytes[at] ^= (byte)(1 + random.Next(255));
        Run($"UPDATE record SET {column} = $bytes WHERE sequence = {sequence}", bytes);
        return new Tampering($"byte {at} of {column} of record {sequence}", Name(sequence));
    }

    private Tampering Remove()
    {
        long sequence = random.NextInt64(last + 1);
        Run($"DELETE FROM record WHERE sequence = {sequence}");
        if (random.Next(2) == 0)
        {
            Run($"DELETE FROM result WHERE sequence = {sequence}; DELETE FROM signature WHERE sequence = {sequence}");
        }

        return new Tampering($"record {sequence} removed", $"record {sequence} is missing", $"records {sequence} to ");
    }

    private Tampering Swap()
    {
        long first = AnyBoard();
        long second = AnyBoard();
        if (first == second)
        {
            second = first == 1 ? 2 : first - 1;
        }

        foreach (string table in new[] { "record", "result" })
        {
            Run($"UPDATE {table} SET sequence = -1 WHERE sequence = {first}");
            Run($"UPDATE {table} SET sequence = {first} WHERE sequence = {second}");
            Run($"UPDATE {table} SET sequence = {second} WHERE sequence = -1");
        }

        return new Tampering($"records {first} and {second} swapped", Name(Math.Min(first, second)));
    }

    // All that follows moves up by one; a copy of another record, hung on no attempt, fills the place.
    private Tampering Insert()
    {
        long place = AnyBoard();
        foreach (string table in new[] { "record", "result", "signature" })
        {
            Run($"UPDATE {table} SET sequence = -sequence - 1 WHERE sequence >= {place}");
            Run($"UPDATE {table} SET sequence = -sequence WHERE sequence < 0");
        }

        Run($"""
            INSERT INTO record (sequence, link, body_hash, kind, crc, body, product, serial, attempt, lot, disposition)
            SELECT {place}, link, body_hash, kind, crc, body, product, serial, attempt, lot, disposition
            FROM record WHERE sequence = {(random.Next(2) == 0 ? place - 1 : place + 1)}
            """);
        return new Tampering($"a record inserted at {place}", Name(place));
    }

    private Tampering ChangeColumn(string table, string key, string[] columns, string more)
    {
        long sequence = AnyBoard();
        string column = columns[random.Next(columns.Length)];
        Alter(table, column, $"{key} = {sequence} {more}");
        return new Tampering($"{table}.{column} of record {sequence}", Name(sequence));
    }

    private Tampering ChangeAttempt()
    {
        long sequence = AnyBoard();
        string where = $"attempt_id = (SELECT attempt_id FROM record WHERE sequence = {sequence})";
        string column = AttemptColumns[random.Next(AttemptColumns.Length)];
        if (random.Next(4) == 0)
        {
            Run($"DELETE FROM attempt WHERE {where}");
        }
        else
        {
            Alter("attempt", column, where);
        }

        return new Tampering($"attempt.{column} of record {sequence}", Name(sequence));
    }

    private Tampering ChangeText()
    {
        string hash = Convert.ToHexStringLower((byte[])Scalar("SELECT sha256 FROM text ORDER BY random() LIMIT 1")!);
        switch (random.Next(3))
        {
            case 0:
                Run($"UPDATE text SET content = content || ' ' WHERE sha256 = x'{hash}'");
                break;
            case 1:
                Run($"UPDATE text SET sha256 = zeroblob(32) WHERE sha256 = x'{hash}'");
                break;
            default:
                Run($"DELETE FROM text WHERE sha256 = x'{hash}'");
                break;
        }

        return new Tampering($"file text {hash}", hash);
    }

    private Tampering ChangeHead()
    {
        Run(random.Next(3) switch
        {
            0 => "DELETE FROM head",
            1 => "UPDATE head SET sequence = sequence - 1",
            _ => "UPDATE head SET link = (SELECT link FROM record WHERE sequence = 3)",
        });
        return new Tampering("head row", "the head ");
    }

    // A clean cut: rows, results, signature and head all fit together afterwards; only the head noted elsewhere tells.
    private Tampering CutTail()
    {
        long kept = AnyBoard();
        foreach (string table in new[] { "record", "result", "signature" })
        {
            Run($"DELETE FROM {table} WHERE sequence > {kept}");
        }

        Run("DELETE FROM attempt WHERE attempt_id NOT IN (SELECT attempt_id FROM record WHERE attempt_id IS NOT NULL)");
        Run($"UPDATE head SET sequence = {kept}, link = (SELECT link FROM record WHERE sequence = {kept})");
        return new Tampering($"tail cut behind {kept}", $"records {kept + 1} to {last} are missing");
    }

    private Tampering LoseRow()
    {
        if (random.Next(2) == 0)
        {
            Run(random.Next(2) == 0 ? "DELETE FROM signature" : "UPDATE signature SET signature = zeroblob(64)");
            return new Tampering("signature", Name(last));
        }

        long sequence = AnyBoard();
        Run($"DELETE FROM result WHERE sequence = {sequence} AND place = {random.Next(RandomRecords.Outputs)}");
        return new Tampering($"a result row of record {sequence} removed", Name(sequence));
    }

    private void Alter(string table, string column, string where) => Run($"""
        UPDATE {table} SET {column} = CASE typeof({column})
            WHEN 'real' THEN {column} * 1.000001 + 1e-9 WHEN 'integer' THEN {column} + 1
            WHEN 'text' THEN {column} || 'x' WHEN 'blob' THEN randomblob(16)
            ELSE CASE '{column}' WHEN 'fault' THEN 'curved' WHEN 'lot' THEN 'x' WHEN 'serial' THEN 'x' ELSE 1 END END
        WHERE {where}
        """);

    private object? Scalar(string sql)
    {
        using SqliteCommand command = connection.CreateCommand();
        command.CommandText = sql;
        return command.ExecuteScalar();
    }

    private void Run(string sql, byte[]? bytes = null)
    {
        using SqliteCommand command = connection.CreateCommand();
        command.CommandText = sql;
        if (bytes is not null)
        {
            command.Parameters.AddWithValue("$bytes", bytes);
        }

        command.ExecuteNonQuery();
    }
}
