using System.Threading.Channels;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Instruments.Modbus;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>What a peer does to its next answer.</summary>
public enum Misbehaviour
{
    None,
    InPieces,
    WrongUnit,
    WrongFunction,
    WrongLength,
    WrongChecksum,
    WrongTransaction,
    Truncated,
    Extended,
    Reset,
    Silence,
}

/// <summary>A Modbus server in this process that misbehaves on request.</summary>
internal sealed class ModbusPeer(bool serial, bool echo = false)
{
    private readonly Channel<bool> received = Channel.CreateUnbounded<bool>();
    private byte[]? held;
    private IByteChannel? channel;

    public const byte Unit = 17;

    public Dictionary<byte, RegisterBank> Banks { get; } = new() { [Unit] = new RegisterBank() };

    public RegisterBank Bank => Banks[Unit];

    /// <summary>Units that do not answer.</summary>
    public HashSet<byte> Dead { get; } = [];

    /// <summary>For the next answer only.</summary>
    public Misbehaviour Next { get; set; }

    /// <summary>Waits until a request has arrived that was not waited for yet.</summary>
    public Task ReceivedAsync() => received.Reader.ReadAsync().AsTask().WaitAsync(TimeSpan.FromSeconds(20));

    /// <summary>Sends the answer that <see cref="Misbehaviour.Silence"/> held back.</summary>
    public async Task SendLateAsync() => await channel!.WriteAsync(held!, CancellationToken.None);

    public async Task ServeAsync(IByteChannel connected)
    {
        channel = connected;
        var buffer = new byte[1024];
        int count = 0;
        while (true)
        {
            count += await connected.ReadAsync(buffer.AsMemory(count), CancellationToken.None);
            if (echo)
            {
                await connected.WriteAsync(buffer.AsMemory(0, count), CancellationToken.None);
            }

            int length = RequestLength(buffer.AsSpan(0, count));
            if (length > 0 && count >= length)
            {
                byte[]? answer = Answer(buffer.AsSpan(0, length));
                count -= length;
                received.Writer.TryWrite(true);
                if (answer is not null)
                {
                    await SendAsync(connected, answer);
                }
            }
        }
    }

    private int RequestLength(ReadOnlySpan<byte> start) => serial ? RtuFrame.RequestLength(start)
        : start.Length >= MbapHeader.Length && MbapHeader.TryRead(start, out MbapHeader header)
            ? MbapHeader.Length + header.PduLength
            : 0;

    private byte[]? Answer(ReadOnlySpan<byte> frame)
    {
        byte unit = serial ? frame[0] : frame[6];
        if (!Banks.TryGetValue(unit, out RegisterBank? bank) || Dead.Contains(unit))
        {
            return null;
        }

        var pdu = new byte[ModbusLimits.PduLength];
        int length = bank.Answer(serial ? RtuFrame.Pdu(frame) : frame[MbapHeader.Length..], pdu);
        pdu[0] ^= (byte)(Next == Misbehaviour.WrongFunction ? 0x07 : 0);
        pdu[1] += (byte)(Next == Misbehaviour.WrongLength ? 2 : 0);
        unit += (byte)(Next == Misbehaviour.WrongUnit ? 1 : 0);
        var answer = new byte[ModbusLimits.TcpFrameLength];
        if (serial)
        {
            length = RtuFrame.Write(unit, pdu.AsSpan(0, length), answer);
            answer[length - 1] ^= (byte)(Next == Misbehaviour.WrongChecksum ? 0x10 : 0);
        }
        else
        {
            int transaction = (frame[0] << 8) + frame[1] + (Next == Misbehaviour.WrongTransaction ? 5 : 0);
            new MbapHeader((ushort)transaction, unit, length).Write(answer);
            pdu.AsSpan(0, length).CopyTo(answer.AsSpan(MbapHeader.Length));
            length += MbapHeader.Length;
        }

        length += Next switch { Misbehaviour.Truncated => -1, Misbehaviour.Extended => 1, _ => 0 };
        return answer[..length];
    }

    private async Task SendAsync(IByteChannel connected, byte[] answer)
    {
        Misbehaviour now = Next;
        Next = Misbehaviour.None;
        switch (now)
        {
            case Misbehaviour.InPieces:
                foreach (byte part in answer)
                {
                    await connected.WriteAsync(new[] { part }, CancellationToken.None);
                    await Task.Yield();
                }

                break;
            case Misbehaviour.Silence or Misbehaviour.Truncated:
                held = answer;
                break;
            case Misbehaviour.Reset:
                throw new LinkLostException("The peer hangs up.");
            default:
                await connected.WriteAsync(answer, CancellationToken.None);
                break;
        }

        if (now == Misbehaviour.Truncated)
        {
            await connected.WriteAsync(answer, CancellationToken.None);
        }
    }
}
