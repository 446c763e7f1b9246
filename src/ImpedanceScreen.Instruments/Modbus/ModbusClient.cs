using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using Microsoft.Extensions.Logging;

namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>
/// A Modbus client: serial frames (RTU) on a serial link, MBAP frames on a TCP link. The one place where an exchange is
/// limited in time, checked against its request, and tried again.
/// </summary>
public sealed class ModbusClient : IModbusClient
{
    private readonly Link link;
    private readonly TimeProvider time;
    private readonly ILogger log;
    private readonly IModbusWire wire;
    private readonly SemaphoreSlim turn = new(1, 1);

    /// <summary>Makes a client; the link is opened at its first exchange.</summary>
    /// <param name="link">The link.</param>
    /// <param name="longestAnswer">Longest time that a unit may take to answer.</param>
    /// <param name="channels">Opens channels.</param>
    /// <param name="time">Clock.</param>
    /// <param name="log">Log.</param>
    public ModbusClient(
        Link link, Func<byte, TimeSpan> longestAnswer, IChannelFactory channels, TimeProvider time, ILogger log)
    {
        ArgumentNullException.ThrowIfNull(link);
        this.link = link;
        this.time = time;
        this.log = log;
        var live = new LiveLink(link, channels, time, log);
        wire = link is SerialLink line ? new RtuWire(live, line, longestAnswer, time) : new TcpWire(live, log);
    }

    /// <inheritdoc/>
    public Task<bool[]> ReadCoilsAsync(byte unit, ushort address, int quantity, CancellationToken cancellation) =>
        ReadBitsAsync(unit, new ReadBits(ModbusFunction.ReadCoils, address, quantity), cancellation);

    /// <inheritdoc/>
    public Task<bool[]> ReadDiscreteInputsAsync(
        byte unit, ushort address, int quantity, CancellationToken cancellation) =>
        ReadBitsAsync(unit, new ReadBits(ModbusFunction.ReadDiscreteInputs, address, quantity), cancellation);

    /// <inheritdoc/>
    public Task<ushort[]> ReadHoldingRegistersAsync(
        byte unit, ushort address, int quantity, CancellationToken cancellation) =>
        ReadRegistersAsync(
            unit, new ReadRegisters(ModbusFunction.ReadHoldingRegisters, address, quantity), cancellation);

    /// <inheritdoc/>
    public Task<ushort[]> ReadInputRegistersAsync(
        byte unit, ushort address, int quantity, CancellationToken cancellation) =>
        ReadRegistersAsync(
            unit, new ReadRegisters(ModbusFunction.ReadInputRegisters, address, quantity), cancellation);

    /// <inheritdoc/>
    public Task WriteSingleCoilAsync(byte unit, ushort address, bool value, CancellationToken cancellation) =>
        WriteAsync(unit, new WriteSingleCoil(address, value), cancellation);

    /// <inheritdoc/>
    public Task WriteSingleRegisterAsync(byte unit, ushort address, ushort value, CancellationToken cancellation) =>
        WriteAsync(unit, new WriteSingleRegister(address, value), cancellation);

    /// <inheritdoc/>
    public Task WriteMultipleCoilsAsync(
        byte unit, ushort address, IReadOnlyList<bool> values, CancellationToken cancellation)
    {
        ArgumentNullException.ThrowIfNull(values);
        return WriteAsync(unit, new WriteMultipleCoils(address, values), cancellation);
    }

    /// <inheritdoc/>
    public Task WriteMultipleRegistersAsync(
        byte unit, ushort address, IReadOnlyList<ushort> values, CancellationToken cancellation)
    {
        ArgumentNullException.ThrowIfNull(values);
        return WriteAsync(unit, new WriteMultipleRegisters(address, values), cancellation);
    }

    /// <inheritdoc/>
    public async Task ReopenAsync() => await InTurnAsync(wire.DropAsync);

    /// <inheritdoc/>
    public ValueTask DisposeAsync() => InTurnAsync(wire.DisposeAsync);

    private async ValueTask InTurnAsync(Func<ValueTask> act)
    {
        // Bounded: whoever has the turn has a time-out.
        await turn.WaitAsync(CancellationToken.None);
        try
        {
            await act();
        }
        finally
        {
            turn.Release();
        }
    }

    private Task<bool[]> ReadBitsAsync(byte unit, ReadBits request, CancellationToken cancellation) =>
        ExchangeAsync(unit, request, static (asked, pdu) => asked.ReadAnswer(pdu.Span), cancellation);

    private Task<ushort[]> ReadRegistersAsync(byte unit, ReadRegisters request, CancellationToken cancellation) =>
        ExchangeAsync(unit, request, static (asked, pdu) => asked.ReadAnswer(pdu.Span), cancellation);

    private Task WriteAsync(byte unit, ModbusWriteRequest request, CancellationToken cancellation) =>
        ExchangeAsync(
            unit,
            request,
            static (asked, pdu) =>
            {
                asked.ReadAnswer(pdu.Span);
                return true;
            },
            cancellation);

    private async Task<T> ExchangeAsync<TRequest, T>(
        byte unit, TRequest request, Func<TRequest, ReadOnlyMemory<byte>, T> readAnswer, CancellationToken cancellation)
        where TRequest : ModbusRequest
    {
        ArgumentOutOfRangeException.ThrowIfZero(unit);
        ArgumentOutOfRangeException.ThrowIfGreaterThan(unit, ModbusLimits.UnitAddress);
        await turn.WaitAsync(cancellation);
        try
        {
            for (int tries = 1; ; tries++)
            {
                try
                {
                    return await TryAsync(unit, request, readAnswer, cancellation);
                }
                catch (ModbusException e) when (e is not ModbusRefusalException && tries <= link.Retries)
                {
                    log.LogWarning(
                        "Link {Link}, unit {Unit}, function {Function:D}, try {Try}: {Why}",
                        link.Name, unit, request.Function, tries, e.Message);
                }
            }
        }
        finally
        {
            turn.Release();
        }
    }

    private async ValueTask<T> TryAsync<TRequest, T>(
        byte unit, TRequest request, Func<TRequest, ReadOnlyMemory<byte>, T> readAnswer, CancellationToken cancellation)
        where TRequest : ModbusRequest
    {
        TimeLimit? limit = null;
        try
        {
            TimeSpan requestTime = await wire.PrepareAsync(unit, request, cancellation);
            limit = new TimeLimit(time, link.Timeout + requestTime, cancellation);
            T answer = readAnswer(request, await wire.ExchangeAsync(limit.Token));
            wire.Succeeded();
            return answer;
        }
        catch (ModbusRefusalException)
        {
            wire.Succeeded();
            throw;
        }
        catch (Exception e) when (e is ModbusException or LinkLostException or OperationCanceledException)
        {
            ModbusException? failure = e switch
            {
                ModbusException already => already,
                LinkLostException lost => new ModbusException(ModbusFault.LinkLost, lost.Message, lost),
                _ when limit is { Expired: true } => TimedOut(e),
                _ => null,
            };
            await wire.FailedAsync(failure?.Fault);
            if (failure is null || ReferenceEquals(failure, e))
            {
                throw;
            }

            throw failure;
        }
        finally
        {
            limit?.Dispose();
        }
    }

    private ModbusException TimedOut(Exception cause) => new(
        ModbusFault.Timeout, $"No complete answer within {link.Timeout.TotalMilliseconds} ms.", cause);
}
