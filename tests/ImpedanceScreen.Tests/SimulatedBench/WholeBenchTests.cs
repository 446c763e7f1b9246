using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.SimulatedBench;
using ImpedanceScreen.SimulatedBench.Populations;
using Microsoft.Extensions.Logging.Abstractions;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>The shipped bench driven by the station's own instruments.</summary>
[Collection(RealTime.Name)]
public sealed class WholeBenchTests
{
    private const double TimeScale = 0.1;
    private const ulong Seed = 3;

    [Fact]
    public async Task Readings_of_the_first_board_give_its_true_sources()
    {
        await using SimulatedBenchHost simulated = await SimulatedBenchHost.StartAsync(
            new SimulatedBenchOptions(Tern6.Job, Tern6.Population, Seed) { TimeScale = TimeScale, FirstSerial = "T6-000001" });
        await using FixtureBench bench = new(
            Tern6.Fixture, simulated.Channels, TimeProvider.System, TimeScale, NullLogger.Instance);
        BenchStart start = await bench.StartAsync(default);
        Assert.True(start.AllOpen.Confirmed, start.AllOpen.Alarm);
        while (await bench.PollInputsAsync(default) is not { BoardPresent: true, InterlockClosed: true })
        {
            await Task.Delay(5);
        }

        Assert.InRange((await bench.ReadTemperatureAsync(default))!.Value, 18.0, 29.0);
        await bench.SwitchAsync(new SwitchOrder([], [Tern6.Fixture.BoardSupply!.Relay]), NothingBetween, default);
        SimulatedBoard board = new BoardFactory(Tern6.Population, Seed, "T6-000001").Make(1);
        foreach (string output in new[] { "TIDE", "SUPPLY" })
        {
            StateJob state = Tern6.Job.States.First(each => each.Output.Name == output);
            TrueSource truth = board.Source(output, "idle");
            Assert.Null(truth.Defect);
            (double unloaded, double loaded) = await MeasureAsync(bench, state);
            Load load = state.Loads[^1];
            double ohm = (load.ResistanceOhm + load.BranchOhm.Value) * ((unloaded / loaded) - 1.0);
            ohm -= state.Output.Sensing == Sensing.TwoWire ? state.Output.LeadOhm.Value : 0.0;

            // Gain 25 ppm, offset 50 µV, noise 15 µV; lead, branch and load leave some milliohms of 1 kΩ.
            Assert.Equal(truth.VoltageVolt, unloaded, 1e-3);
            Assert.Equal(truth.ResistanceOhm, ohm, 0.002 + (truth.ResistanceOhm * 1e-3));
        }

        Assert.True((await bench.OpenAllAsync()).Confirmed);
    }

    private static async Task<(double Unloaded, double Loaded)> MeasureAsync(FixtureBench bench, StateJob state)
    {
        List<Relay> path = [state.Output.Selector, state.Output.Sense, Tern6.Fixture.CommonReturn!];
        await bench.SwitchAsync(new SwitchOrder([], path), NothingBetween, default);
        double unloaded = await ReadAsync(bench, state);
        Relay load = state.Loads[^1].Relay;
        await bench.SwitchAsync(new SwitchOrder([], [load]), NothingBetween, default);
        double loaded = await ReadAsync(bench, state);
        Assert.Contains(load, (await bench.CheckContactsAsync(NothingBetween, default)).Proved);
        await bench.SwitchAsync(new SwitchOrder([load, .. path], []), NothingBetween, default);
        return (unloaded, loaded);
    }

    private static Task NothingBetween(CancellationToken cancellation) => Task.CompletedTask;

    private static async Task<double> ReadAsync(FixtureBench bench, StateJob state)
    {
        await Task.Delay(20);
        await bench.SetRangeAsync(state.Meter, state.Range, default);
        return (await bench.ReadAsync(state.Meter, 1, default))[0].Volt;
    }
}
