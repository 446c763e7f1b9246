using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;

namespace ImpedanceScreen.Benchmarks.Replies;

/// <summary>A channel whose far end sends given bytes in pieces, whatever it is asked, and hangs up.</summary>
internal sealed class CannedChannel(byte[] bytes, Random random) : IByteChannel, IChannelFactory
{
    private int sent;

    public bool IsDead { get; private set; }

    public Task<IByteChannel> OpenAsync(Link link, CancellationToken cancellation) =>
        Task.FromResult<IByteChannel>(this);

    public ValueTask<int> ReadAsync(Memory<byte> buffer, CancellationToken cancellation)
    {
        if (buffer.IsEmpty)
        {
            throw new InvalidOperationException("A read into no room would wait for ever.");
        }

        if (sent == bytes.Length)
        {
            IsDead = true;
            throw new LinkLostException("The far end hung up.");
        }

        int count = Math.Min(buffer.Length, random.Next(1, bytes.Length - sent + 1));
        bytes.AsMemory(sent, count).CopyTo(buffer);
        sent += count;
        return ValueTask.FromResult(count);
    }

    public ValueTask WriteAsync(ReadOnlyMemory<byte> bytes, CancellationToken cancellation) => ValueTask.CompletedTask;

    public void DiscardReceived()
    {
        // Nothing has been sent before it is asked for.
    }

    public ValueTask DisposeAsync() => ValueTask.CompletedTask;
}
