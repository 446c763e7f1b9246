using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Modbus;
using ImpedanceScreen.SimulatedBench;
using ImpedanceScreen.SimulatedBench.Logging;
using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>The relay units as the project's own client sees them.</summary>
[Collection(RealTime.Name)]
public sealed class ModbusServerTests
{
    private const byte Unit = 7;

    private static readonly Link Tcp = new ExactBench().RelayLink;

    private static readonly SerialLink Line = new(
        "relays", "/dev/none", 115200, LineParity.Even, 1, TimeSpan.FromMilliseconds(200), 0, EchoExpected: false);

    public static TheoryData<bool> Wires => [false, true];

    [Theory]
    [MemberData(nameof(Wires))]
    public async Task All_functions_are_served(bool isSerial)
    {
        ExactBench exact = isSerial ? new ExactBench { RelayLink = Line } : new ExactBench();
        await using SimulatedBenchHost bench = await Started.BenchAsync(exact);
        await using ModbusClient client = Started.Client(bench, exact.RelayLink);
        await client.WriteSingleCoilAsync(Unit, 20, value: true, default);
        await client.WriteMultipleCoilsAsync(Unit, 21, [true, false, true], default);
        Assert.Equal([false, true, true, false, true], (await client.ReadCoilsAsync(Unit, 19, 5, default)).AsEnumerable());
        await client.WriteSingleRegisterAsync(Unit, 0, 4711, default);
        await client.WriteMultipleRegistersAsync(Unit, 1, [1, 65535], default);
        Assert.Equal([4711, 1, 65535], await client.ReadHoldingRegistersAsync(Unit, 0, 3, default));
        Assert.Equal([230], await client.ReadInputRegistersAsync(Unit, 0, 1, default));
        Assert.Equal(24, (await client.ReadDiscreteInputsAsync(Unit, 0, 24, default)).Length);
    }

    [Theory]
    [MemberData(nameof(Wires))]
    public async Task What_a_unit_does_not_have_is_refused_and_the_next_request_is_served(bool isSerial)
    {
        ExactBench exact = isSerial ? new ExactBench { RelayLink = Line } : new ExactBench();
        await using SimulatedBenchHost bench = await Started.BenchAsync(exact);
        await using ModbusClient client = Started.Client(bench, exact.RelayLink);
        Func<Task>[] beyond =
        [
            () => client.ReadCoilsAsync(Unit, 20, 5, default),
            () => client.WriteSingleCoilAsync(Unit, 24, value: true, default),
            () => client.ReadDiscreteInputsAsync(Unit, 24, 1, default),
            () => client.ReadInputRegistersAsync(Unit, 1, 1, default),
            () => client.WriteMultipleRegistersAsync(Unit, 15, [1, 2], default),
        ];
        foreach (Func<Task> exchange in beyond)
        {
            ModbusRefusalException refusal = await Assert.ThrowsAsync<ModbusRefusalException>(exchange);
            Assert.Equal(ModbusExceptionCode.IllegalDataAddress, refusal.Code);
        }

        Assert.Equal(24, (await client.ReadCoilsAsync(Unit, 0, 24, default)).Length);
    }

    [Fact]
    public async Task A_unit_that_is_not_there_is_silent_on_a_line_and_refused_by_the_gateway_over_tcp()
    {
        await using SimulatedBenchHost overTcp = await Started.BenchAsync(new ExactBench());
        await using ModbusClient tcp = Started.Client(overTcp, Tcp);
        ModbusRefusalException refusal = await Assert.ThrowsAsync<ModbusRefusalException>(
            () => tcp.ReadCoilsAsync(8, 0, 1, default));
        Assert.Equal(ModbusExceptionCode.GatewayTargetFailedToRespond, refusal.Code);

        await using SimulatedBenchHost onLine = await Started.BenchAsync(new ExactBench { RelayLink = Line });
        await using ModbusClient serial = Started.Client(onLine, Line);
        ModbusException silence = await Assert.ThrowsAsync<ModbusException>(
            () => serial.ReadCoilsAsync(8, 0, 1, default));
        Assert.Equal(ModbusFault.Timeout, silence.Fault);
        Assert.Single(await serial.ReadCoilsAsync(Unit, 0, 1, default));
    }

    [Fact]
    public async Task Bytes_on_a_line_take_their_time_and_are_logged()
    {
        // 1200 bit/s with parity: 11 bits, 9.17 ms a character.
        SerialLink slow = Line with { BaudRate = 1200, Timeout = TimeSpan.FromSeconds(5) };
        await using SimulatedBenchHost bench = await Started.BenchAsync(new ExactBench { RelayLink = slow });
        await using ModbusClient client = Started.Client(bench, slow);
        long start = TimeProvider.System.GetTimestamp();
        await client.ReadCoilsAsync(Unit, 0, 8, default);
        TimeSpan taken = TimeProvider.System.GetElapsedTime(start);
        LineUsed used = Assert.Single(bench.Events.OfType<LineUsed>());
        Assert.Equal((8, 6), (used.BytesIn, used.BytesOut));

        // Never sooner than the line allows: that cannot depend on the machine's load.
        Assert.True(taken >= 14 * slow.CharacterTime, $"{taken}");
    }

    [Fact]
    public async Task A_silent_program_makes_the_unit_drop_its_coils()
    {
        FakeTimeProvider time = new();
        await using SimulatedBenchHost bench = await Started.BenchAsync(
            new ExactBench { Watchdog = TimeSpan.FromMilliseconds(500) }, time);
        await using ModbusClient client = Started.Client(bench, Tcp, time);
        await client.WriteMultipleCoilsAsync(Unit, 10, [true, true], default);
        time.Advance(TimeSpan.FromMilliseconds(400));
        Assert.Equal([true, true], (await client.ReadCoilsAsync(Unit, 10, 2, default)).AsEnumerable());
        time.Advance(TimeSpan.FromMilliseconds(400));
        Assert.Equal([true, true], (await client.ReadCoilsAsync(Unit, 10, 2, default)).AsEnumerable());
        time.Advance(TimeSpan.FromMilliseconds(501));
        Assert.Equal([false, false], (await client.ReadCoilsAsync(Unit, 10, 2, default)).AsEnumerable());
        CoilChanged[] dropped = [.. bench.Events.OfType<CoilChanged>().Where(coil => coil.Cause == "watchdog")];
        Assert.Equal([(10, false), (11, false)], dropped.Select(coil => ((int)coil.Coil, coil.On)));
    }
}
