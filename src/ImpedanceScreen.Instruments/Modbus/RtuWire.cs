using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Timing;

namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>
/// Frames on a serial line. They carry no identifier, so a late answer looks right: after a failure the line stays
/// silent for the
/// unit's longest answer and is drained before it is used again.
/// </summary>
internal sealed class RtuWire : IModbusWire
{
    private const int TimeoutsBeforeReopening = 2;

    private readonly byte[] outgoing = new byte[ModbusLimits.RtuFrameLength];
    private readonly byte[] incoming = new byte[ModbusLimits.RtuFrameLength];
    private readonly LiveLink link;
    private readonly SerialLink line;
    private readonly Func<byte, TimeSpan> longestAnswer;
    private readonly TimeProvider time;
    private readonly TimeSpan silentInterval;
    private IByteChannel? channel;
    private int outgoingLength;
    private int answerLength;
    private byte unit;
    private int timeouts;
    private bool sent;
    private bool doubtful;
    private Deadline silentUntil;
    private Deadline mayStart;

    public RtuWire(LiveLink link, SerialLink line, Func<byte, TimeSpan> longestAnswer, TimeProvider time)
    {
        this.link = link;
        this.line = line;
        this.longestAnswer = longestAnswer;
        this.time = time;
        silentInterval = RtuTiming.SilentInterval(line);
        mayStart = Deadline.In(time, TimeSpan.Zero);
    }

    private TimeSpan RequestTime => outgoingLength * line.CharacterTime;

    public async ValueTask<TimeSpan> PrepareAsync(byte unit, ModbusRequest request, CancellationToken cancellation)
    {
        this.unit = unit;
        sent = false;
        channel = await link.GetAsync(cancellation);
        if (doubtful)
        {
            await silentUntil.WaitAsync(cancellation);
            await QuietLine.DrainAsync(channel, time, cancellation);
            NoteLineBusyFor(TimeSpan.Zero);
            doubtful = false;
        }

        answerLength = RtuFrame.Overhead + request.AnswerLength;
        outgoing[0] = unit;
        outgoingLength = RtuFrame.Seal(outgoing, request.Write(outgoing.AsSpan(1)));
        await mayStart.WaitAsync(cancellation);
        channel.DiscardReceived();
        return RequestTime;
    }

    public async ValueTask<ReadOnlyMemory<byte>> ExchangeAsync(CancellationToken cancellation)
    {
        sent = true;
        await channel!.WriteAsync(outgoing.AsMemory(0, outgoingLength), cancellation);

        // The port only took the bytes: the last one leaves when all have gone over the line.
        NoteLineBusyFor(RequestTime);
        if (line.EchoExpected)
        {
            await ReceiveEchoAsync(cancellation);
        }

        ReadOnlyMemory<byte> frame = await ReceiveFrameAsync(cancellation);
        NoteLineBusyFor(TimeSpan.Zero);
        if (!RtuFrame.IsIntact(frame.Span))
        {
            throw new ModbusException(ModbusFault.WrongChecksum, "The checksum of the answer is wrong.");
        }

        return frame.Span[0] == unit
            ? frame[1..^2]
            : throw new ModbusException(
                ModbusFault.WrongUnit, $"Unit {frame.Span[0]} answered a request to unit {unit}.");
    }

    public void Succeeded()
    {
        timeouts = 0;
        link.Proved();
    }

    public ValueTask FailedAsync(ModbusFault? fault)
    {
        if (sent)
        {
            // Outlives the channel: what the unit still sends arrives on a new one as well.
            doubtful = true;
            silentUntil = Deadline.In(time, longestAnswer(unit));
        }

        timeouts = fault == ModbusFault.Timeout ? timeouts + 1 : timeouts;
        return fault == ModbusFault.LinkLost || timeouts >= TimeoutsBeforeReopening
            ? DropAsync()
            : ValueTask.CompletedTask;
    }

    public ValueTask DropAsync()
    {
        timeouts = 0;
        return link.DropAsync();
    }

    public ValueTask DisposeAsync() => link.DisposeAsync();

    private void NoteLineBusyFor(TimeSpan span) => mayStart = Deadline.In(time, span + silentInterval);

    private async ValueTask ReceiveEchoAsync(CancellationToken cancellation)
    {
        // Exactly the bytes that were sent: the answer may be right behind them.
        await ReceiveAsync(incoming.AsMemory(0, outgoingLength), 0, outgoingLength, cancellation);
        if (!incoming.AsSpan(0, outgoingLength).SequenceEqual(outgoing.AsSpan(0, outgoingLength)))
        {
            throw new ModbusException(
                ModbusFault.Collision, "The line returned other bytes than were sent: another sender, or no echo.");
        }
    }

    private async ValueTask<ReadOnlyMemory<byte>> ReceiveFrameAsync(CancellationToken cancellation)
    {
        int received = 0;
        int length = RtuFrame.LengthPending;
        while (length == RtuFrame.LengthPending)
        {
            received = await ReceiveAsync(incoming, received, received + 1, cancellation);
            length = RtuFrame.AnswerLength(incoming.AsSpan(0, received));
        }

        if (length == RtuFrame.LengthUnknown)
        {
            throw new ModbusException(ModbusFault.WrongFunction, $"No answer has function {incoming[1]}.");
        }

        // A corrupted byte count would have the exchange wait for bytes that never come.
        if (length > answerLength && length > RtuFrame.Overhead + ModbusRefusalException.PduLength)
        {
            throw new ModbusException(
                ModbusFault.WrongLength, $"The answer's frame is {length} bytes long where {answerLength} are due.");
        }

        // Takes what there is: bytes beyond a frame are a fault and are noticed as one.
        received = await ReceiveAsync(incoming, received, length, cancellation);
        return received == length
            ? incoming.AsMemory(0, length)
            : throw new ModbusException(
                ModbusFault.WrongLength, $"{received} bytes arrived for an answer of {length}.");
    }

    private async ValueTask<int> ReceiveAsync(
        Memory<byte> buffer, int received, int needed, CancellationToken cancellation)
    {
        while (received < needed)
        {
            received += await channel!.ReadAsync(buffer[received..], cancellation);
        }

        return received;
    }
}
