using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Modbus;
using ImpedanceScreen.SimulatedBench;
using Microsoft.Extensions.Logging.Abstractions;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>Starts benches in this process and opens clients to them.</summary>
internal static class Started
{
    public static Task<SimulatedBenchHost> BenchAsync(ExactBench exact, TimeProvider? time = null) =>
        SimulatedBenchHost.StartAsync(Options(exact) with { Time = time ?? TimeProvider.System });

    public static SimulatedBenchOptions Options(ExactBench exact) =>
        new(exact.Job(), exact.Population(), Seed: 1) { FirstSerial = "X-001" };

    public static ModbusClient Client(SimulatedBenchHost bench, Link link, TimeProvider? time = null) => new(
        link, _ => TimeSpan.FromMilliseconds(20), bench.Channels, time ?? TimeProvider.System, NullLogger.Instance);
}
