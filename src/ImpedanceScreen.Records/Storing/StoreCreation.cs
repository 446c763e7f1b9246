using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Sealing;

namespace ImpedanceScreen.Records.Storing;

/// <summary>Makes a store: key first, then the file under another name, synced, then its own name.</summary>
internal static class StoreCreation
{
    public static void Create(string path, string station, string programVersion, TimeProvider time)
    {
        ArgumentException.ThrowIfNullOrWhiteSpace(station);
        ArgumentNullException.ThrowIfNull(time);
        string unfinished = path + ".new";
        foreach (string file in new[] { path, StorePath.KeyOf(path), unfinished, path + "-wal" })
        {
            if (File.Exists(file))
            {
                throw new IOException($"'{file}' is there already. Move it away, or name another store.");
            }
        }

        StorePath.RequireLocal(path);
        using StationKey key = StationKey.Generate();
        key.WriteNew(StorePath.KeyOf(path));
        using (StoreConnection connection = StoreConnection.CreateNew(unfinished))
        {
            SealedRecord origin = SealedRecord.Seal(
                new StoreRecord(station, time.GetUtcNow(), programVersion, key.PublicKey));
            new Appender(connection, key, (_, action) => action()).AppendOrigin(origin);
            connection.Pragma("wal_checkpoint(TRUNCATE)");
        }

        // From here the store is whole; it gets its name only when it is on disk.
        DurableFile.SyncFile(unfinished);
        File.Move(unfinished, path);
        DurableFile.SyncFolder(StorePath.FolderOf(path));
    }
}
