using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Modbus;
using ImpedanceScreen.SimulatedBench;
using ImpedanceScreen.SimulatedBench.Logging;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>The handler's side of the handshake.</summary>
[Collection(RealTime.Name)]
public sealed class HandlerTests
{
    private const byte Unit = 7;
    private const ushort Present = 16;
    private const ushort Interlock = 17;

    private static readonly Link Relays = new ExactBench().RelayLink;

    [Fact]
    public async Task Boards_come_and_go_by_the_bin_coils_until_they_are_exhausted()
    {
        await using SimulatedBenchHost bench = await SimulatedBenchHost.StartAsync(
            Started.Options(new ExactBench()) with { Boards = 3 });
        await using ModbusClient client = Started.Client(bench, Relays);
        await SortAsync(client, ExactBench.Handshake.PassBin);
        await SortAsync(client, ExactBench.Handshake.FailBin);
        await SortAsync(client, bin: null);
        await Task.Delay(50);
        Assert.Equal([false, true], (await client.ReadDiscreteInputsAsync(Unit, Present, 2, default)).AsEnumerable());
        Assert.Equal(
            [(1, "X-001", "pass"), (2, "X-002", "fail"), (3, "X-003", "retest")],
            bench.Events.OfType<BoardLifted>().Select(lifted => ((int)lifted.Ordinal, lifted.Label, lifted.Bin)));
    }

    [Fact]
    public async Task The_next_board_waits_until_done_and_busy_are_off()
    {
        await using SimulatedBenchHost bench = await Started.BenchAsync(new ExactBench());
        await using ModbusClient client = Started.Client(bench, Relays);
        await AwaitAsync(client, Present, on: true);
        await SetAsync(client, ExactBench.Handshake.Busy, on: true);
        await SetAsync(client, ExactBench.Handshake.Done, on: true);
        await AwaitAsync(client, Present, on: false);
        await SetAsync(client, ExactBench.Handshake.Done, on: false);
        await Task.Delay(50);
        Assert.False((await client.ReadDiscreteInputsAsync(Unit, Present, 1, default))[0]);
        await SetAsync(client, ExactBench.Handshake.Busy, on: false);
        await AwaitAsync(client, Present, on: true);
    }

    [Fact]
    public async Task A_hand_lifts_the_board_and_opens_the_interlock_which_opens_the_contacts()
    {
        await using SimulatedBenchHost bench = await Started.BenchAsync(new ExactBench());
        await using ModbusClient client = Started.Client(bench, Relays);
        await AwaitAsync(client, Present, on: true);
        await SetAsync(client, ExactBench.Handshake.Busy, on: true);
        Relay load = CircuitBench.Load("L10");
        await SetAsync(client, load, on: true);
        await AwaitAsync(client, load.ContactInput!.Value, on: true);

        bench.OpenInterlock();
        await AwaitAsync(client, Interlock, on: false);
        await AwaitAsync(client, load.ContactInput.Value, on: false);
        Assert.True((await client.ReadCoilsAsync(Unit, load.Coil, 1, default))[0]);
        bench.Lift();
        Assert.False((await client.ReadDiscreteInputsAsync(Unit, Present, 1, default))[0]);
        Assert.Equal("none", Assert.Single(bench.Events.OfType<BoardLifted>()).Bin);

        bench.CloseInterlock();
        await SetAsync(client, ExactBench.Handshake.Busy, on: false);
        await AwaitAsync(client, Present, on: true);
        Assert.Equal([1L, 2L], bench.Events.OfType<BoardPresented>().Select(board => board.Ordinal));
    }

    [Fact]
    public async Task Without_handshake_a_board_stays_until_it_is_replaced()
    {
        await using SimulatedBenchHost bench = await Started.BenchAsync(new ExactBench { HasHandshake = false });
        await using ModbusClient client = Started.Client(bench, Relays);
        await AwaitAsync(client, Present, on: true);
        bench.Lift();
        await Task.Delay(50);
        Assert.False((await client.ReadDiscreteInputsAsync(Unit, Present, 1, default))[0]);
        bench.Replace();
        await AwaitAsync(client, Present, on: true);
        bench.Replace();
        await AwaitAsync(client, Present, on: false);
        await AwaitAsync(client, Present, on: true);
        Assert.Equal([1L, 2L, 3L], bench.Events.OfType<BoardPresented>().Select(board => board.Ordinal));
    }

    private static async Task SortAsync(ModbusClient client, Relay? bin)
    {
        await AwaitAsync(client, Present, on: true);
        await SetAsync(client, ExactBench.Handshake.Busy, on: true);
        if (bin is not null)
        {
            await SetAsync(client, bin, on: true);
        }

        await SetAsync(client, ExactBench.Handshake.Done, on: true);
        await AwaitAsync(client, Present, on: false);
        if (bin is not null)
        {
            await SetAsync(client, bin, on: false);
        }

        await SetAsync(client, ExactBench.Handshake.Done, on: false);
        await SetAsync(client, ExactBench.Handshake.Busy, on: false);
    }

    private static Task SetAsync(ModbusClient client, Relay relay, bool on) =>
        client.WriteSingleCoilAsync(Unit, relay.Coil, on, default);

    private static async Task AwaitAsync(ModbusClient client, ushort input, bool on)
    {
        using CancellationTokenSource limit = new(TimeSpan.FromSeconds(20));
        while ((await client.ReadDiscreteInputsAsync(Unit, input, 1, limit.Token))[0] != on)
        {
            await Task.Delay(2, limit.Token);
        }
    }
}
