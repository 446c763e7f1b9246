using System.ComponentModel;
using System.Runtime.InteropServices;

namespace ImpedanceScreen.Records.Storing;

/// <summary>
/// Files that must survive a power cut. System calls of a write: open(O_CREAT|O_EXCL), write, fsync of the file, then
/// open, fsync, close of the folder.
/// </summary>
internal static partial class DurableFile
{
    /// <summary>
    /// Writes a file that must not exist yet, readable by its owner only, and syncs it and its folder.
    /// </summary>
    public static void WriteNewSecret(string path, string content)
    {
        var options = new FileStreamOptions { Mode = FileMode.CreateNew, Access = FileAccess.Write };
        if (!OperatingSystem.IsWindows())
        {
            options.UnixCreateMode = UnixFileMode.UserRead | UnixFileMode.UserWrite;
        }

        using (var stream = new FileStream(path, options))
        {
            stream.Write(System.Text.Encoding.ASCII.GetBytes(content));
            stream.Flush(flushToDisk: true);
        }

        SyncFolder(StorePath.FolderOf(path));
    }

    /// <summary>Syncs a file that is there.</summary>
    public static void SyncFile(string path)
    {
        using var stream = new FileStream(path, FileMode.Open, FileAccess.ReadWrite, FileShare.ReadWrite);
        stream.Flush(flushToDisk: true);
    }

    /// <summary>Syncs a folder, so that the names in it survive. Windows does so by itself.</summary>
    public static void SyncFolder(string folder)
    {
        if (OperatingSystem.IsWindows())
        {
            return;
        }

        int descriptor = Open(folder, 0);
        if (descriptor < 0)
        {
            throw new IOException($"Folder '{folder}' cannot be opened to sync it.", new Win32Exception());
        }

        int outcome = FSync(descriptor);
        var cause = new Win32Exception();
        _ = Close(descriptor);
        if (outcome != 0)
        {
            throw new IOException($"Folder '{folder}' cannot be synced.", cause);
        }
    }

    [LibraryImport("libc", EntryPoint = "open", SetLastError = true, StringMarshalling = StringMarshalling.Utf8)]
    private static partial int Open(string path, int flags);

    [LibraryImport("libc", EntryPoint = "fsync", SetLastError = true)]
    private static partial int FSync(int descriptor);

    [LibraryImport("libc", EntryPoint = "close", SetLastError = true)]
    private static partial int Close(int descriptor);
}
