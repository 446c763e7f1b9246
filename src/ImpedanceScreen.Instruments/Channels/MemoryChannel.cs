using System.Threading.Channels;

namespace ImpedanceScreen.Instruments.Channels;

/// <summary>One end of an in-memory byte pipe. Disposing of one end hangs up on the other.</summary>
public sealed class MemoryChannel : IByteChannel
{
    private readonly Channel<byte[]> incoming;
    private readonly Channel<byte[]> outgoing;
    private ReadOnlyMemory<byte> rest;

    private MemoryChannel(Channel<byte[]> incoming, Channel<byte[]> outgoing)
    {
        this.incoming = incoming;
        this.outgoing = outgoing;
    }

    /// <inheritdoc/>
    public bool IsDead { get; private set; }

    /// <summary>Makes both ends of a pipe.</summary>
    public static (MemoryChannel Near, MemoryChannel Far) CreatePair()
    {
        var there = Channel.CreateUnbounded<byte[]>(new() { SingleReader = true, SingleWriter = true });
        var back = Channel.CreateUnbounded<byte[]>(new() { SingleReader = true, SingleWriter = true });
        return (new(back, there), new(there, back));
    }

    /// <inheritdoc/>
    public async ValueTask<int> ReadAsync(Memory<byte> buffer, CancellationToken cancellation)
    {
        ThrowIfDead();
        if (rest.IsEmpty)
        {
            try
            {
                rest = await incoming.Reader.ReadAsync(cancellation);
            }
            catch (ChannelClosedException e)
            {
                IsDead = true;
                throw new LinkLostException("The far end of the memory channel is closed.", e);
            }
        }

        int count = Math.Min(rest.Length, buffer.Length);
        rest[..count].CopyTo(buffer);
        rest = rest[count..];
        return count;
    }

    /// <inheritdoc/>
    public ValueTask WriteAsync(ReadOnlyMemory<byte> bytes, CancellationToken cancellation)
    {
        ThrowIfDead();
        cancellation.ThrowIfCancellationRequested();
        if (!outgoing.Writer.TryWrite(bytes.ToArray()))
        {
            IsDead = true;
            throw new LinkLostException("The far end of the memory channel is closed.");
        }

        return ValueTask.CompletedTask;
    }

    /// <inheritdoc/>
    public void DiscardReceived()
    {
        ThrowIfDead();
        rest = default;
        while (incoming.Reader.TryRead(out _))
        {
            // Each piece is dropped as it is taken.
        }
    }

    /// <inheritdoc/>
    public ValueTask DisposeAsync()
    {
        IsDead = true;
        outgoing.Writer.TryComplete();
        incoming.Writer.TryComplete();
        return ValueTask.CompletedTask;
    }

    private void ThrowIfDead()
    {
        if (IsDead)
        {
            throw new LinkLostException("The memory channel is closed.");
        }
    }
}
