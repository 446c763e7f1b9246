using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>Opens in-memory channels; a peer serves the far end of each.</summary>
internal sealed class MemoryChannels : IChannelFactory
{
    private readonly Dictionary<string, Func<IByteChannel, Task>> peers = [];

    public MemoryChannels()
    {
    }

    public MemoryChannels(Link link, Func<IByteChannel, Task> serve) => Serve(link.Name, serve);

    /// <summary>How many channels were opened.</summary>
    public int Opened { get; private set; }

    /// <summary>How many openings fail from now on.</summary>
    public int Refusals { get; set; }

    /// <summary>Wraps each near end, for a test that watches it.</summary>
    public Func<IByteChannel, IByteChannel> Wrap { get; set; } = channel => channel;

    public void Serve(string link, Func<IByteChannel, Task> serve) => peers[link] = serve;

    public Task<IByteChannel> OpenAsync(Link link, CancellationToken cancellation)
    {
        if (Refusals > 0)
        {
            Refusals--;
            throw new LinkLostException("Nobody answers there.");
        }

        Opened++;
        (MemoryChannel near, MemoryChannel far) = MemoryChannel.CreatePair();
        _ = Task.Run(() => ServeAsync(peers[link.Name], far), CancellationToken.None);
        return Task.FromResult(Wrap(near));
    }

    private static async Task ServeAsync(Func<IByteChannel, Task> serve, MemoryChannel far)
    {
        try
        {
            await serve(far);
        }
        catch (LinkLostException)
        {
            // The near end hung up.
        }
        finally
        {
            await far.DisposeAsync();
        }
    }
}
