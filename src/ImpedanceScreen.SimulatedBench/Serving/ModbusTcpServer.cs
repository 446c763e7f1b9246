using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Instruments.Modbus;

namespace ImpedanceScreen.SimulatedBench.Serving;

/// <summary>Modbus over TCP. A unit that is not there is answered as a gateway does.</summary>
internal sealed class ModbusTcpServer(UnitGroup units) : ILinkServer
{
    /// <inheritdoc/>
    public async Task ServeAsync(IByteChannel channel, CancellationToken cancellation)
    {
        var request = new byte[ModbusLimits.TcpFrameLength];
        var answer = new byte[ModbusLimits.TcpFrameLength];
        while (true)
        {
            await ReadAsync(channel, request.AsMemory(0, MbapHeader.Length), cancellation);
            if (!MbapHeader.TryRead(request, out MbapHeader header))
            {
                // Out of step: no later byte can be trusted, so the connection is given up.
                return;
            }

            Memory<byte> pdu = request.AsMemory(MbapHeader.Length, header.PduLength);
            await ReadAsync(channel, pdu, cancellation);
            int length = Answer(header, pdu.Span, answer);
            await channel.WriteAsync(answer.AsMemory(0, length), cancellation);
        }
    }

    private int Answer(MbapHeader header, ReadOnlySpan<byte> pdu, Span<byte> answer)
    {
        Span<byte> room = answer[MbapHeader.Length..];
        int length = units.Answer(header.Unit, pdu, room);
        if (length == 0)
        {
            length = new ModbusRefusalException(
                (ModbusFunction)pdu[0], ModbusExceptionCode.GatewayTargetFailedToRespond).Write(room);
        }

        new MbapHeader(header.Transaction, header.Unit, length).Write(answer);
        return MbapHeader.Length + length;
    }

    private static async Task ReadAsync(IByteChannel channel, Memory<byte> whole, CancellationToken cancellation)
    {
        while (!whole.IsEmpty)
        {
            int count = await channel.ReadAsync(whole, cancellation);
            whole = whole[count..];
        }
    }
}
