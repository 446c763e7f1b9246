using System.Security.Cryptography;
using System.Text;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Station.Hosting;

/// <summary>
/// One process a fixture: an advisory lock for each link of the fixture, held as long as the process lives and given
/// back by the operating system however it ends.
/// </summary>
internal sealed class FixtureLock : IDisposable
{
    private readonly List<FileStream> held = [];

    private FixtureLock()
    {
    }

    /// <exception cref="NotBegunException">Another process holds one of the links.</exception>
    public static FixtureLock Take(FixtureFile fixture)
    {
        var taken = new FixtureLock();
        try
        {
            foreach (string address in fixture.Links.Select(Address).Order(StringComparer.Ordinal))
            {
                taken.held.Add(Lock(address, fixture.Name));
            }

            return taken;
        }
        catch
        {
            taken.Dispose();
            throw;
        }
    }

    public void Dispose() => held.ForEach(file => file.Dispose());

    private static FileStream Lock(string address, string fixture)
    {
        string name = Convert.ToHexStringLower(SHA256.HashData(Encoding.UTF8.GetBytes(address)))[..16];
        // A service may have a temporary folder of its own; the folder for locks is the same for all.
        string folder = Directory.Exists("/run/lock") ? "/run/lock" : Path.GetTempPath();
        string path = Path.Combine(folder, $"impedance-screen-{name}.lock");
        try
        {
            return new FileStream(path, FileMode.OpenOrCreate, FileAccess.ReadWrite, FileShare.None);
        }
        catch (UnauthorizedAccessException e)
        {
            throw new NotBegunException(
                $"fixture {fixture}: the lock file {path} for {address} may not be opened: let this account write it", e);
        }
        catch (IOException e)
        {
            throw new NotBegunException(
                $"fixture {fixture}: another process works on {address} (lock {path}): wait for it or end it", e);
        }
    }

    private static string Address(Link link) => link switch
    {
        TcpLink tcp => $"{tcp.Host}:{tcp.Port}",
        SerialLink serial => serial.Device,
        _ => throw new InvalidOperationException($"link kind {link.GetType().Name} has no address"),
    };
}
