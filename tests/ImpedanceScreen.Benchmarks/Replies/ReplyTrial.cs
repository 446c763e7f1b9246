using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Modbus;
using ImpedanceScreen.Instruments.Scpi;
using Microsoft.Extensions.Logging.Abstractions;

namespace ImpedanceScreen.Benchmarks.Replies;

/// <summary>How one reply was taken.</summary>
internal enum ReplyOutcome
{
    /// <summary>As an answer.</summary>
    Answer,

    /// <summary>As a typed error.</summary>
    TypedError,
}

/// <summary>
/// Feeds replies to the whole way of an answer: channel, frame, message, check against the request; or channel, line,
/// number or error
/// entry. Anything but an answer or a typed error leaves as the exception it is.
/// </summary>
internal sealed class ReplyTrial
{
    private const byte Unit = 17;
    private static readonly TimeSpan Timeout = TimeSpan.FromSeconds(30);
    private static readonly TcpLink Tcp = new("tcp", "canned", 1, Timeout, 0);
    private static readonly SerialLink Serial = new("serial", "canned", 115200, LineParity.None, 1, Timeout, 0, false);

    private readonly Random random;
    private readonly ReplyMutator mutator;

    public ReplyTrial(ulong seed)
    {
        random = new Random(seed.GetHashCode());
        mutator = new ReplyMutator(random);
    }

    public async Task<ReplyOutcome> RunAsync()
    {
        try
        {
            await (random.Next(4) switch
            {
                0 => ModbusAsync(Serial, mutator.Rtu),
                1 => ModbusAsync(Tcp, (unit, pdu) => mutator.Tcp(1, unit, pdu)),
                2 => ScpiAsync(line => _ = ScpiNumber.Parse(line)),
                _ => ScpiAsync(line => _ = ErrorEntry.Parse(line)),
            });
            return ReplyOutcome.Answer;
        }
        catch (Exception e) when (e is ModbusException or ScpiException)
        {
            return ReplyOutcome.TypedError;
        }
    }

    private async Task ModbusAsync(Link link, Func<byte, byte[], byte[]> frame)
    {
        (ModbusRequest request, byte[] pdu) = mutator.Modbus();
        CannedChannel channel = new(frame(Unit, pdu), random);
        await using ModbusClient client =
            new(link, _ => TimeSpan.Zero, channel, TimeProvider.System, NullLogger.Instance);
        await (request switch
        {
            ReadBits { Function: ModbusFunction.ReadCoils } =>
                client.ReadCoilsAsync(Unit, request.Address, request.Quantity, default),
            ReadBits => client.ReadDiscreteInputsAsync(Unit, request.Address, request.Quantity, default),
            ReadRegisters { Function: ModbusFunction.ReadHoldingRegisters } =>
                client.ReadHoldingRegistersAsync(Unit, request.Address, request.Quantity, default),
            ReadRegisters => client.ReadInputRegistersAsync(Unit, request.Address, request.Quantity, default),
            WriteSingleCoil write => client.WriteSingleCoilAsync(Unit, write.Address, write.Values[0], default),
            WriteSingleRegister write => client.WriteSingleRegisterAsync(Unit, write.Address, write.Values[0], default),
            WriteCoils write => client.WriteMultipleCoilsAsync(Unit, write.Address, write.Values, default),
            WriteRegisters write => client.WriteMultipleRegistersAsync(Unit, write.Address, write.Values, default),
            _ => throw new InvalidOperationException($"No method for {request.GetType().Name}."),
        });
    }

    private async Task ScpiAsync(Action<string> parse)
    {
        CannedChannel channel = new(mutator.Line(), random);
        await using ScpiSession session = new(Tcp, channel, TimeProvider.System, NullLogger.Instance);
        await session.CleanAsync(default);
        parse(await session.QueryAsync("READ?", TimeSpan.Zero, default));
    }
}
