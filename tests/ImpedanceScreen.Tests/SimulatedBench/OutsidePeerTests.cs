using System.Diagnostics;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.SimulatedBench;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>The relay units as a client that nobody here wrote sees them: pymodbus, from Debian's packages.</summary>
[Collection(RealTime.Name)]
public sealed class OutsidePeerTests
{
    [Fact]
    public async Task Pymodbus_drives_the_units_over_tcp()
    {
        await using SimulatedBenchHost bench = await SimulatedBenchHost.StartAsync(
            Started.Options(new ExactBench()) with { Listening = Listening.OnFreePorts });
        await Peers.HoldPymodbusAsync(["tcp", .. bench.Addresses["relays"].Split(':')]);
    }

    [Fact]
    public async Task Pymodbus_drives_the_units_on_a_serial_line()
    {
        string folder = Directory.CreateTempSubdirectory("simulated-bench-").FullName;
        string near = Path.Combine(folder, "near");
        string far = Path.Combine(folder, "far");
        using Process line = Peers.Start("socat", $"pty,raw,echo=0,link={near}", $"pty,raw,echo=0,link={far}");
        try
        {
            while (!File.Exists(near) || !File.Exists(far))
            {
                Assert.False(line.HasExited, "socat ended");
                await Task.Delay(10);
            }

            SerialLink link = new(
                "relays", near, 115200, LineParity.None, 1, TimeSpan.FromSeconds(1), 0, EchoExpected: false);
            await using SimulatedBenchHost bench = await SimulatedBenchHost.StartAsync(
                Started.Options(new ExactBench { RelayLink = link }) with
                {
                    Listening = Listening.OnFreePorts,
                    SerialDevices = new Dictionary<string, string> { ["relays"] = far },
                });
            await Peers.HoldPymodbusAsync("serial", near, "115200");
        }
        finally
        {
            line.Kill();
            await line.WaitForExitAsync();
            Directory.Delete(folder, recursive: true);
        }
    }
}
