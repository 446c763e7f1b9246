using System.Net;
using System.Net.Sockets;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;

namespace ImpedanceScreen.SimulatedBench.Serving;

/// <summary>Lets TCP clients in to a link's server; loopback only, since it is a simulation.</summary>
internal sealed class TcpDoor : IDisposable
{
    private readonly TcpListener listener;
    private readonly ILinkServer server;
    private readonly string name;

    /// <exception cref="BenchStartException">The address is not free or not loopback.</exception>
    public TcpDoor(TcpLink link, ILinkServer server, bool onFreePort)
    {
        this.server = server;
        name = link.Name;
        IPAddress address = onFreePort ? IPAddress.Loopback : Loopback(link);
        listener = new TcpListener(address, onFreePort ? 0 : link.Port);
        try
        {
            listener.Start();
        }
        catch (SocketException e)
        {
            throw new BenchStartException(
                $"link '{link.Name}': {link.Host}:{link.Port} cannot be listened on ({e.Message}); use --free-ports", e);
        }
    }

    /// <summary>Host and port.</summary>
    public string Address => listener.LocalEndpoint.ToString()!;

    /// <summary>Serves every client that comes, each on its own.</summary>
    public async Task RunAsync(CancellationToken cancellation)
    {
        List<Task> served = [];
        try
        {
            while (true)
            {
                Socket client = await listener.AcceptSocketAsync(cancellation);
                served.RemoveAll(task => task.IsCompletedSuccessfully);
                served.Add(ServeAsync(client, cancellation));
            }
        }
        finally
        {
            await Task.WhenAll(served);
        }
    }

    public void Dispose() => listener.Dispose();

    private async Task ServeAsync(Socket client, CancellationToken cancellation)
    {
        await using var channel = new TcpChannel(client, name);
        try
        {
            await server.ServeAsync(channel, cancellation);
        }
        catch (Exception e) when (e is LinkLostException or OperationCanceledException)
        {
            // The client went, or the bench ends: both are ordinary.
        }
    }

    private static IPAddress Loopback(TcpLink link)
    {
        IPAddress? address = link.Host == "localhost" ? IPAddress.Loopback : null;
        if (address is null && (!IPAddress.TryParse(link.Host, out address) || !IPAddress.IsLoopback(address)))
        {
            throw new BenchStartException(
                $"link '{link.Name}': {link.Host} is no loopback address; use --free-ports or name 127.0.0.1");
        }

        return address;
    }
}
