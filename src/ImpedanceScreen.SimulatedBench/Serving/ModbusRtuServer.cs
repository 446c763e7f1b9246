using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Instruments.Modbus;

namespace ImpedanceScreen.SimulatedBench.Serving;

/// <summary>
/// Modbus on a serial line: several units, each silent unless it is meant and the frame is intact. Answers come after
/// the silent interval and take their time on the line.
/// </summary>
internal sealed class ModbusRtuServer(BenchModel model, UnitGroup units, SerialLink line) : ILinkServer
{
    // Longest gap within a frame that a pseudo-terminal or adapter makes of a frame sent in one piece.
    private static readonly TimeSpan GapMost = TimeSpan.FromMilliseconds(50);

    private readonly LinePace pace = new(model, line);

    /// <inheritdoc/>
    public async Task ServeAsync(IByteChannel channel, CancellationToken cancellation)
    {
        var frame = new byte[ModbusLimits.RtuFrameLength];
        var answer = new byte[ModbusLimits.RtuFrameLength];
        while (true)
        {
            int received = await channel.ReadAsync(frame, cancellation);
            long started = pace.Now;
            int length = await CompleteAsync(channel, frame, received, cancellation);
            if (length == 0 || !RtuFrame.IsIntact(frame.AsSpan(0, length)))
            {
                await QuietAsync(channel, frame, cancellation);
                continue;
            }

            await pace.PassAsync(started, length, RtuTiming.SilentInterval(line), cancellation);
            long answering = pace.Now;
            int count = Answer(frame.AsSpan(0, length), answer);
            await pace.PassAsync(answering, count, TimeSpan.Zero, cancellation);
            if (count > 0)
            {
                await channel.WriteAsync(answer.AsMemory(0, count), cancellation);
            }

            pace.Note(length, count);
        }
    }

    private int Answer(ReadOnlySpan<byte> frame, Span<byte> answer)
    {
        Span<byte> pdu = stackalloc byte[ModbusLimits.PduLength];
        int length = units.Answer(frame[0], RtuFrame.Pdu(frame), pdu);
        return length == 0 ? 0 : RtuFrame.Write(frame[0], pdu[..length], answer);
    }

    // Reads on until the frame is as long as its first bytes say; 0 where they say nothing or the rest stays away.
    private async Task<int> CompleteAsync(
        IByteChannel channel, Memory<byte> frame, int received, CancellationToken cancellation)
    {
        while (true)
        {
            int length = RtuFrame.RequestLength(frame.Span[..received]);
            if (length == RtuFrame.LengthUnknown || length > frame.Length || (length > 0 && received > length))
            {
                // A whole frame with a function that nobody serves is refused, not passed over.
                return RtuFrame.IsIntact(frame.Span[..received]) ? received : 0;
            }

            if (length > 0 && received == length)
            {
                return length;
            }

            int more = await ReadWithinAsync(channel, frame[received..], cancellation);
            if (more == 0)
            {
                return 0;
            }

            received += more;
        }
    }

    private async Task QuietAsync(IByteChannel channel, Memory<byte> scratch, CancellationToken cancellation)
    {
        while (await ReadWithinAsync(channel, scratch, cancellation) > 0)
        {
            // Dropped: after a broken frame only silence tells where the next one begins.
        }
    }

    private async Task<int> ReadWithinAsync(IByteChannel channel, Memory<byte> buffer, CancellationToken cancellation)
    {
        using var gap = new CancellationTokenSource(GapMost, model.Clock.Time);
        using var either = CancellationTokenSource.CreateLinkedTokenSource(gap.Token, cancellation);
        try
        {
            return await channel.ReadAsync(buffer, either.Token);
        }
        catch (OperationCanceledException) when (!cancellation.IsCancellationRequested)
        {
            return 0;
        }
    }
}
