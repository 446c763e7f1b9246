using System.Globalization;
using Microsoft.Data.Sqlite;

namespace ImpedanceScreen.Records.Storing;

/// <summary>
/// One connection to a store, set up so that a commit is durable when it returns, and asserted to be so. Statements
/// are prepared once and
/// reused. For one thread.
/// </summary>
internal sealed class StoreConnection : IDisposable
{
    private const int SynchronousFull = 2;

    private readonly SqliteConnection connection;
    private readonly Dictionary<string, SqliteCommand> prepared = new(StringComparer.Ordinal);

    private StoreConnection(SqliteConnection connection) => this.connection = connection;

    /// <summary>Opens an existing store for reading and writing.</summary>
    public static StoreConnection Open(string path) => Open(path, SqliteOpenMode.ReadWrite);

    /// <summary>Opens an existing store for reading only.</summary>
    public static StoreConnection OpenReadOnly(string path) => Open(path, SqliteOpenMode.ReadOnly);

    /// <summary>Makes a new database with the store's tables.</summary>
    public static StoreConnection CreateNew(string path, int pageSize = StoreSchema.PageSize)
    {
        StoreConnection made = Connect(path, SqliteOpenMode.ReadWriteCreate);
        try
        {
            made.Run(string.Create(CultureInfo.InvariantCulture, $"""
                PRAGMA page_size = {pageSize};
                PRAGMA application_id = {StoreSchema.ApplicationId};
                PRAGMA user_version = {StoreSchema.Version};
                PRAGMA journal_mode = WAL;
                """));
            made.Run(StoreSchema.Tables);
            made.SetUp();
            return made;
        }
        catch
        {
            made.Dispose();
            throw;
        }
    }

    /// <summary>A prepared statement with its parameters' values set, to be executed at once.</summary>
    public SqliteCommand Statement(string sql, params ReadOnlySpan<object?> values)
    {
        if (!prepared.TryGetValue(sql, out SqliteCommand? command))
        {
            command = connection.CreateCommand();
            command.CommandText = sql;
            for (int at = 0; at < values.Length; at++)
            {
                command.Parameters.Add(new SqliteParameter { ParameterName = "$" + (char)('a' + at) });
            }

            prepared.Add(sql, command);
        }

        for (int at = 0; at < values.Length; at++)
        {
            command.Parameters[at].Value = values[at] ?? DBNull.Value;
        }

        return command;
    }

    /// <summary>Executes a statement that gives no rows.</summary>
    /// <returns>Number of rows changed.</returns>
    public int Execute(string sql, params ReadOnlySpan<object?> values) => Statement(sql, values).ExecuteNonQuery();

    /// <summary>The first column of the first row.</summary>
    public object? Scalar(string sql, params ReadOnlySpan<object?> values) => Statement(sql, values).ExecuteScalar();

    /// <summary>A pragma's whole number.</summary>
    public long Pragma(string name) => (long)(Scalar($"PRAGMA {name}") ?? -1L);

    /// <inheritdoc/>
    public void Dispose()
    {
        foreach (SqliteCommand command in prepared.Values)
        {
            command.Dispose();
        }

        connection.Dispose();
    }

    private static StoreConnection Open(string path, SqliteOpenMode mode)
    {
        StorePath.RequireStore(path);
        StoreConnection opened = Connect(path, mode);
        try
        {
            opened.SetUp();
            opened.RequireOwnTables(path);
            return opened;
        }
        catch
        {
            opened.Dispose();
            throw;
        }
    }

    private static StoreConnection Connect(string path, SqliteOpenMode mode)
    {
        var opened = new SqliteConnection(new SqliteConnectionStringBuilder
        {
            DataSource = path, Mode = mode, Pooling = false, ForeignKeys = true, DefaultTimeout = 20,
        }.ToString());
        try
        {
            opened.Open();
            return new StoreConnection(opened);
        }
        catch
        {
            opened.Dispose();
            throw;
        }
    }

    private void SetUp()
    {
        // Another process holds the lock for one commit at a time; the journal is cut after a checkpoint.
        Run("PRAGMA busy_timeout = 10000; PRAGMA synchronous = FULL; PRAGMA journal_size_limit = 16777216;");
        if (Pragma("synchronous") != SynchronousFull || Scalar("PRAGMA journal_mode") is not "wal"
            || Pragma("foreign_keys") != 1)
        {
            throw new InvalidOperationException("The store's connection does not make commits durable.");
        }
    }

    private void RequireOwnTables(string path)
    {
        if (Pragma("application_id") != StoreSchema.ApplicationId || Pragma("user_version") != StoreSchema.Version)
        {
            throw new InvalidOperationException(
                $"'{path}' is no record store of this program's version. Name another file with --store.");
        }
    }

    private void Run(string sql)
    {
        using SqliteCommand command = connection.CreateCommand();
        command.CommandText = sql;
        command.ExecuteNonQuery();
    }
}
