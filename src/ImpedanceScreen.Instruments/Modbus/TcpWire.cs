using ImpedanceScreen.Instruments.Channels;
using Microsoft.Extensions.Logging;

namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>
/// Frames over TCP. An answer is known by its transaction identifier: those of earlier requests are dropped until the
/// deadline. After a failure the connection is closed, so that nothing of it can reach the next exchange.
/// </summary>
internal sealed class TcpWire(LiveLink link, ILogger log) : IModbusWire
{
    private readonly byte[] outgoing = new byte[ModbusLimits.TcpFrameLength];
    private readonly byte[] incoming = new byte[2 * ModbusLimits.TcpFrameLength];
    private IByteChannel? channel;
    private int outgoingLength;
    private int received;
    private int consumed;
    private byte unit;
    private ushort transaction;
    private int sentOnChannel;

    public async ValueTask<TimeSpan> PrepareAsync(byte unit, ModbusRequest request, CancellationToken cancellation)
    {
        IByteChannel current = await link.GetAsync(cancellation);
        if (!ReferenceEquals(current, channel))
        {
            channel = current;
            received = 0;
            consumed = 0;
            sentOnChannel = 0;
        }

        this.unit = unit;
        transaction++;
        int pduLength = request.Write(outgoing.AsSpan(MbapHeader.Length));
        new MbapHeader(transaction, unit, pduLength).Write(outgoing);
        outgoingLength = MbapHeader.Length + pduLength;
        return TimeSpan.Zero;
    }

    public async ValueTask<ReadOnlyMemory<byte>> ExchangeAsync(CancellationToken cancellation)
    {
        sentOnChannel = Math.Min(sentOnChannel + 1, ushort.MaxValue);
        await channel!.WriteAsync(outgoing.AsMemory(0, outgoingLength), cancellation);
        while (true)
        {
            MbapHeader header = await ReceiveFrameAsync(cancellation);
            if (header.Transaction == transaction)
            {
                return header.Unit == unit
                    ? incoming.AsMemory(MbapHeader.Length, header.PduLength)
                    : throw new ModbusException(
                        ModbusFault.WrongUnit, $"Unit {header.Unit} answered a request to unit {unit}.");
            }

            if ((ushort)(transaction - header.Transaction) >= sentOnChannel)
            {
                throw new ModbusException(
                    ModbusFault.WrongTransaction,
                    $"The answer is to transaction {header.Transaction}, which was never sent.");
            }

            log.LogWarning(
                "Link {Link}: late answer to transaction {Late} dropped while {Current} is due.",
                link.Link.Name, header.Transaction, transaction);
        }
    }

    public void Succeeded() => link.Proved();

    public ValueTask FailedAsync(ModbusFault? fault) => fault is null ? ValueTask.CompletedTask : link.DropAsync();

    public ValueTask DropAsync() => link.DropAsync();

    public ValueTask DisposeAsync() => link.DisposeAsync();

    private async ValueTask<MbapHeader> ReceiveFrameAsync(CancellationToken cancellation)
    {
        received -= consumed;
        incoming.AsSpan(consumed, received).CopyTo(incoming);
        consumed = 0;
        await ReceiveAsync(MbapHeader.Length, cancellation);
        if (!MbapHeader.TryRead(incoming, out MbapHeader header))
        {
            throw new ModbusException(
                ModbusFault.WrongTransaction,
                $"{Convert.ToHexString(incoming, 0, MbapHeader.Length)} is no header of a Modbus frame.");
        }

        await ReceiveAsync(MbapHeader.Length + header.PduLength, cancellation);
        consumed = MbapHeader.Length + header.PduLength;
        return header;
    }

    private async ValueTask ReceiveAsync(int length, CancellationToken cancellation)
    {
        while (received < length)
        {
            received += await channel!.ReadAsync(incoming.AsMemory(received), cancellation);
        }
    }
}
