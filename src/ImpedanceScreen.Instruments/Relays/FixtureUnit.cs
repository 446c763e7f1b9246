using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Modbus;

namespace ImpedanceScreen.Instruments.Relays;

/// <summary>
/// A relay unit as the bench talks to it: a failed exchange is a bench fault that says what to look at.
/// </summary>
internal sealed class FixtureUnit(RelayUnit unit, Link link, IModbusClient client, TimeProvider time)
{
    /// <summary>Where nothing is to be done between two exchanges: what opens all relays waits for nothing.</summary>
    public static Func<CancellationToken, Task> NothingBetween { get; } = static _ => Task.CompletedTask;

    private long answeredAt = time.GetTimestamp();

    public RelayUnit Unit => unit;

    public Link Link => link;

    public IModbusClient Client => client;

    /// <summary>Whether the last exchange failed.</summary>
    public bool IsFailing { get; private set; }

    /// <summary>Whether the unit's watchdog has not heard from this program for a third of its time.</summary>
    public bool NeedsWord => unit.WatchdogSilence is { } silence && time.GetElapsedTime(answeredAt) > silence / 3;

    /// <summary>The values of these coils in the order of their addresses.</summary>
    public Task<IReadOnlyDictionary<ushort, bool>> ReadCoilsAsync(
        IEnumerable<ushort> coils, Func<CancellationToken, Task> between, CancellationToken cancellation) =>
        ReadAsync(coils, client.ReadCoilsAsync, between, cancellation);

    /// <summary>The values of these discrete inputs.</summary>
    public Task<IReadOnlyDictionary<ushort, bool>> ReadInputsAsync(
        IEnumerable<ushort> inputs, Func<CancellationToken, Task> between, CancellationToken cancellation) =>
        ReadAsync(inputs, client.ReadDiscreteInputsAsync, between, cancellation);

    public async Task<ushort> ReadInputRegisterAsync(ushort register, CancellationToken cancellation) =>
        (await AskAsync(client.ReadInputRegistersAsync(unit.UnitAddress, register, 1, cancellation)))[0];

    /// <summary>Sets neighbouring coils to absolute values in one exchange.</summary>
    public Task WriteCoilsAsync(ushort first, IReadOnlyList<bool> values, CancellationToken cancellation) =>
        AskAsync(Answered(values.Count == 1
            ? client.WriteSingleCoilAsync(unit.UnitAddress, first, values[0], cancellation)
            : client.WriteMultipleCoilsAsync(unit.UnitAddress, first, values, cancellation)));

    private static async Task<bool> Answered(Task write)
    {
        await write;
        return true;
    }

    private async Task<IReadOnlyDictionary<ushort, bool>> ReadAsync(
        IEnumerable<ushort> addresses,
        Func<byte, ushort, int, CancellationToken, Task<bool[]>> read,
        Func<CancellationToken, Task> between,
        CancellationToken cancellation)
    {
        var values = new Dictionary<ushort, bool>();
        foreach (AddressSpan span in AddressSpan.Cover(addresses, AddressSpan.ReadGapMost, ModbusLimits.ReadBits))
        {
            await between(cancellation);
            bool[] bits = await AskAsync(read(unit.UnitAddress, span.First, span.Count, cancellation));
            for (int i = 0; i < bits.Length; i++)
            {
                values[(ushort)(span.First + i)] = bits[i];
            }
        }

        return values;
    }

    private async Task<T> AskAsync<T>(Task<T> exchange)
    {
        try
        {
            T answer = await exchange;
            IsFailing = false;
            answeredAt = time.GetTimestamp();
            return answer;
        }
        catch (ModbusException e)
        {
            IsFailing = true;
            throw new BenchFaultException(
                BenchFault.FixtureLost,
                $"Relay unit '{unit.Name}' (unit {unit.UnitAddress}) did not do as told: {e.Message}",
                e);
        }
    }
}
