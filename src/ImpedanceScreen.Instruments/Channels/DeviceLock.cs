using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Instruments.Channels;

/// <summary>
/// An advisory lock on a serial device. The operating system lets root open a port twice without complaint, and two
/// programs on one line would read each other's answers. The lock goes with the process, however it ends.
/// </summary>
internal static class DeviceLock
{
    /// <summary>Takes the lock.</summary>
    /// <exception cref="LinkLostException">Somebody else holds it.</exception>
    public static FileStream Take(SerialLink link)
    {
        string file = PathFor(link.Device);
        try
        {
            // Exclusive sharing is an advisory file lock on Unix. The file stays: removing it would race with a waiter.
            return new FileStream(file, FileMode.OpenOrCreate, FileAccess.ReadWrite, FileShare.None);
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException)
        {
            throw new LinkLostException(
                $"Link '{link.Name}': {link.Device} is in use by another program or channel (lock file {file}). "
                + "End the other one first.",
                e);
        }
    }

    private static string PathFor(string device)
    {
        // A stable name (by-id) and the device it points at are one port.
        string target = File.Exists(device)
            ? new FileInfo(device).ResolveLinkTarget(returnFinalTarget: true)?.FullName ?? device
            : device;
        string name = target.Trim('/').Replace('/', '-').Replace('\\', '-').Replace(':', '-');
        string folder = Directory.Exists("/run/lock") ? "/run/lock" : Path.GetTempPath();
        return Path.Combine(folder, $"impedance-screen-{name}.lock");
    }
}
