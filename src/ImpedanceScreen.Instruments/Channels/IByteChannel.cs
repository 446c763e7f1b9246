namespace ImpedanceScreen.Instruments.Channels;

/// <summary>
/// Bytes to and from one instrument. One reader and one writer at a time. A channel lives once: after the first failure
/// it is dead,
/// is only disposed of, and another one is opened.
/// </summary>
public interface IByteChannel : IAsyncDisposable
{
    /// <summary>Whether the far end is gone or the channel failed; no further byte is sent or received then.</summary>
    bool IsDead { get; }

    /// <summary>
    /// Waits for bytes. A cancelled read loses nothing: what arrives later is there for the next read.
    /// </summary>
    /// <param name="buffer">Where they go; at least one byte long.</param>
    /// <param name="cancellation">Ends the wait.</param>
    /// <returns>How many arrived, at least one.</returns>
    /// <exception cref="LinkLostException">The channel is dead.</exception>
    /// <exception cref="OperationCanceledException">The caller cancelled.</exception>
    ValueTask<int> ReadAsync(Memory<byte> buffer, CancellationToken cancellation);

    /// <summary>
    /// Hands all bytes over for sending. A cancelled write leaves it unknown how much was sent: the channel is dead
    /// then.
    /// </summary>
    /// <exception cref="LinkLostException">The channel is dead.</exception>
    /// <exception cref="OperationCanceledException">The caller cancelled.</exception>
    ValueTask WriteAsync(ReadOnlyMemory<byte> bytes, CancellationToken cancellation);

    /// <summary>Drops what has arrived and was not read.</summary>
    /// <exception cref="LinkLostException">The channel is dead.</exception>
    void DiscardReceived();
}
