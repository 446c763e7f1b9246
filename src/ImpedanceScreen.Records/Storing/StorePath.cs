namespace ImpedanceScreen.Records.Storing;

/// <summary>Where a store may lie.</summary>
internal static class StorePath
{
    /// <summary>The station's key beside its store.</summary>
    public static string KeyOf(string path) => path + ".key";

    /// <summary>The folder that holds the store, absolute.</summary>
    public static string FolderOf(string path) =>
        Path.GetDirectoryName(Path.GetFullPath(path)) ?? Path.GetPathRoot(Path.GetFullPath(path))!;

    /// <summary>Refuses a path without a store.</summary>
    /// <exception cref="FileNotFoundException">There is none; the message says what to do.</exception>
    public static void RequireStore(string path)
    {
        if (!File.Exists(path))
        {
            throw new FileNotFoundException(
                $"There is no record store at '{path}'. Check the path, or make a store once with: "
                + $"store-create --store {path} --station NAME",
                path);
        }

        RequireLocal(path);
    }

    /// <summary>
    /// Refuses a folder on another machine: the write-ahead log needs shared memory and honest locks.
    /// </summary>
    /// <exception cref="IOException">It is a network file system.</exception>
    public static void RequireLocal(string path)
    {
        if (new DriveInfo(FolderOf(path)).DriveType == DriveType.Network)
        {
            throw new IOException(
                $"'{path}' lies on a network file system, where a record store can be damaged. Put it on a local disk.");
        }
    }
}
