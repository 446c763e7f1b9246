namespace ImpedanceScreen.Records.Storing;

/// <summary>The tables of a store. STRICT: a column holds its declared type or nothing.</summary>
internal static class StoreSchema
{
    /// <summary>Marks a database as a record store (<c>PRAGMA application_id</c>): "ISRS" in ASCII.</summary>
    public const int ApplicationId = 0x49535253;

    /// <summary>Version of the tables (<c>PRAGMA user_version</c>).</summary>
    public const int Version = 1;

    /// <summary>
    /// Page size, bytes; chosen by measurement (DEVELOPERS.md): a body fills a page or two of its own, and an append
    /// writes ten small pages to the log instead of ten large ones.
    /// </summary>
    public const int PageSize = 2048;

    public const string Tables = """
        CREATE TABLE text (
            sha256 BLOB PRIMARY KEY,
            content TEXT NOT NULL
        ) STRICT, WITHOUT ROWID;
        CREATE TABLE attempt (
            attempt_id BLOB PRIMARY KEY,
            product TEXT NOT NULL,
            serial TEXT NOT NULL,
            lot TEXT,
            fixture TEXT NOT NULL,
            started_ticks INTEGER NOT NULL,
            finished INTEGER NOT NULL DEFAULT 0
        ) STRICT, WITHOUT ROWID;
        CREATE INDEX attempt_unfinished ON attempt (fixture, started_ticks) WHERE finished = 0;
        CREATE TABLE record (
            sequence INTEGER PRIMARY KEY,
            link BLOB NOT NULL,
            body_hash BLOB NOT NULL,
            kind TEXT NOT NULL,
            crc INTEGER NOT NULL,
            body BLOB NOT NULL,
            attempt_id BLOB REFERENCES attempt (attempt_id),
            product TEXT,
            serial TEXT,
            attempt INTEGER,
            lot TEXT,
            disposition TEXT
        ) STRICT;
        CREATE UNIQUE INDEX record_attempt ON record (attempt_id) WHERE attempt_id IS NOT NULL;
        CREATE INDEX record_serial ON record (serial) WHERE serial IS NOT NULL;
        CREATE INDEX record_lot ON record (lot) WHERE lot IS NOT NULL;
        CREATE TABLE result (
            sequence INTEGER NOT NULL REFERENCES record (sequence),
            place INTEGER NOT NULL,
            output TEXT NOT NULL,
            state TEXT NOT NULL,
            vth_v REAL,
            u_vth_v REAL,
            rth_ohm REAL,
            u_rth_ohm REAL,
            correlation REAL,
            droop REAL,
            decision TEXT NOT NULL,
            fault TEXT,
            PRIMARY KEY (sequence, place)
        ) STRICT, WITHOUT ROWID;
        CREATE TABLE signature (
            sequence INTEGER PRIMARY KEY REFERENCES record (sequence),
            signature BLOB NOT NULL
        ) STRICT;
        CREATE TABLE head (
            id INTEGER PRIMARY KEY CHECK (id = 0),
            sequence INTEGER NOT NULL,
            link BLOB NOT NULL
        ) STRICT;
        """;
}
