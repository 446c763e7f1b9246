using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;

namespace ImpedanceScreen.SimulatedBench.Serving;

/// <summary>Opens in-memory channels to the link servers, for callers in the same process.</summary>
internal sealed class MemoryLinks(LinkServers servers, CancellationToken end) : IChannelFactory
{
    private readonly Lock gate = new();
    private readonly List<Task> served = [];

    /// <inheritdoc/>
    public Task<IByteChannel> OpenAsync(Link link, CancellationToken cancellation)
    {
        ArgumentNullException.ThrowIfNull(link);
        (MemoryChannel near, MemoryChannel far) = MemoryChannel.CreatePair();
        lock (gate)
        {
            served.RemoveAll(task => task.IsCompletedSuccessfully);
            served.Add(ServeAsync(link.Name, far));
        }

        return Task.FromResult<IByteChannel>(near);
    }

    /// <summary>Ends when every channel was served to its end.</summary>
    public Task WhenAllServedAsync()
    {
        lock (gate)
        {
            return Task.WhenAll(served);
        }
    }

    private async Task ServeAsync(string link, MemoryChannel far)
    {
        await using (far)
        {
            try
            {
                await servers[link].ServeAsync(far, end);
            }
            catch (Exception e) when (e is LinkLostException or OperationCanceledException)
            {
                // The near end was closed, or the bench ends: both are ordinary.
            }
        }
    }
}
