using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Timing;
using Microsoft.Extensions.Logging;

namespace ImpedanceScreen.Instruments.Channels;

/// <summary>
/// A link that is opened when needed and opened anew when its channel was dropped or died. The first new channel is
/// opened
/// at once; while no exchange succeeds on it, the pauses before further ones grow.
/// </summary>
/// <remarks>One caller at a time.</remarks>
internal sealed class LiveLink(Link link, IChannelFactory factory, TimeProvider time, ILogger log) : IAsyncDisposable
{
    private static readonly TimeSpan FirstPause = TimeSpan.FromMilliseconds(20);
    private static readonly TimeSpan LongestPause = TimeSpan.FromMilliseconds(500);

    private IByteChannel? channel;
    private Deadline pauseEnds = Deadline.In(time, TimeSpan.Zero);
    private int unproved;
    private bool disposed;

    public Link Link => link;

    /// <summary>The open channel; opens one where there is none.</summary>
    /// <exception cref="LinkLostException">It cannot be opened.</exception>
    public async ValueTask<IByteChannel> GetAsync(CancellationToken cancellation)
    {
        ObjectDisposedException.ThrowIf(disposed, this);
        if (channel is { IsDead: false } open)
        {
            return open;
        }

        await DropAsync();
        await pauseEnds.WaitAsync(cancellation);
        pauseEnds = Deadline.In(time, PauseAfter(unproved));
        unproved++;
        channel = await OpenAsync(cancellation);
        log.LogDebug("Link {Link} is open.", link.Name);
        return channel;
    }

    /// <summary>Notes that an exchange succeeded: the next new channel needs no pause.</summary>
    public void Proved()
    {
        if (unproved > 0)
        {
            unproved = 0;
            pauseEnds = Deadline.In(time, TimeSpan.Zero);
        }
    }

    /// <summary>Disposes of the channel; the next use opens another.</summary>
    public async ValueTask DropAsync()
    {
        if (channel is { } old)
        {
            channel = null;
            log.LogDebug("Link {Link} is dropped.", link.Name);
            await old.DisposeAsync();
        }
    }

    public async ValueTask DisposeAsync()
    {
        disposed = true;
        await DropAsync();
    }

    private static TimeSpan PauseAfter(int tries)
    {
        TimeSpan pause = FirstPause * (1 << Math.Min(tries, 10));
        return pause < LongestPause ? pause : LongestPause;
    }

    private async Task<IByteChannel> OpenAsync(CancellationToken cancellation)
    {
        using var limit = new TimeLimit(time, link.Timeout, cancellation);
        try
        {
            return await factory.OpenAsync(link, limit.Token);
        }
        catch (OperationCanceledException e) when (limit.Expired)
        {
            throw new LinkLostException(
                $"Link '{link.Name}' did not open within {link.Timeout.TotalMilliseconds} ms. Look at power and cable.",
                e);
        }
    }
}
