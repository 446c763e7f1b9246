using System.Globalization;
using System.Text;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Instruments.Modbus;
using ImpedanceScreen.SimulatedBench;
using ImpedanceScreen.SimulatedBench.Logging;
using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>The simulated meter's dialogue, byte for byte.</summary>
[Collection(RealTime.Name)]
public sealed class MeterServerTests
{
    private static readonly Link MeterLink = new ExactBench().MeterLink;

    // Numbers and texts of SCPI-1999 volume 2 section 21.8.
    [Theory]
    [InlineData("*IDN?", "Impedance Screen,Test Meter,1,1")]
    [InlineData("*opc?", "1")]
    [InlineData("SYST:ERR?", "0,\"No error\"")]
    [InlineData("system:error:next?", "0,\"No error\"")]
    [InlineData("CONF:VOLT:DC;:SENS:VOLT:RANG 1;:SENS:VOLT:DC:RANG?", "1.000000E+00")]
    [InlineData("sense:voltage:dc:range:upper 1.01;VOLT:RANG?", "1.000000E+01")]
    [InlineData("SENS:VOLT:NPLC 0.5;NPLC 3;:SYST:ERR?", "-113,\"Undefined header\"")]
    [InlineData("VOLT:DC:NPLCycles 0.5;VOLT:NPLC?", "5.000000E-01")]
    [InlineData("VOLT:NPLC 2;*RST;VOLT:NPLC?", "1.000000E+01")]
    [InlineData("MEAS:CURR?;SYST:ERR?", "-113,\"Undefined header\"")]
    [InlineData("VOLTA:RANG 1;SYST:ERR?", "-113,\"Undefined header\"")]
    [InlineData("VOLT:RANG;SYST:ERR?", "-109,\"Missing parameter\"")]
    [InlineData("VOLT:RANG ten;SYST:ERR?", "-104,\"Data type error\"")]
    [InlineData("VOLT:RANG 11;SYST:ERR?", "-222,\"Data out of range\"")]
    [InlineData("VOLT:NPLC 1000;SYST:ERR?", "-222,\"Data out of range\"")]
    [InlineData("*IDN? 1;SYST:ERR?", "-108,\"Parameter not allowed\"")]
    [InlineData("BAD;WORSE 1;SYST:ERR?;SYST:ERR?;SYST:ERR?",
        "-113,\"Undefined header\";-113,\"Undefined header\";0,\"No error\"")]
    [InlineData("BAD;*CLS;SYST:ERR?", "0,\"No error\"")]
    public async Task The_meter_answers(string line, string answer)
    {
        await using SimulatedBenchHost bench = await Started.BenchAsync(new ExactBench());
        await using IByteChannel channel = await bench.Channels.OpenAsync(MeterLink, default);
        Assert.Equal(answer, await AskAsync(channel, line));
    }

    [Fact]
    public async Task An_overflowing_error_queue_says_so_in_its_last_entry()
    {
        await using SimulatedBenchHost bench = await Started.BenchAsync(new ExactBench());
        await using IByteChannel channel = await bench.Channels.OpenAsync(MeterLink, default);
        string bad = string.Concat(Enumerable.Repeat("BAD;", 25));
        string all = await AskAsync(channel, bad + string.Join(';', Enumerable.Repeat("SYST:ERR?", 21)));
        Assert.EndsWith("-113,\"Undefined header\";-350,\"Queue overflow\";0,\"No error\"", all, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_reading_takes_integration_by_the_time_scale_and_turnaround_in_full()
    {
        FakeTimeProvider time = new();
        await using SimulatedBenchHost bench = await SimulatedBenchHost.StartAsync(
            Started.Options(new ExactBench()) with { Time = time, TimeScale = 0.1 });
        await using IByteChannel channel = await bench.Channels.OpenAsync(MeterLink, default);
        await AskAsync(channel, "VOLT:NPLC 2;*OPC?");
        Task<string> reading = AskAsync(channel, "READ?");
        while (!reading.IsCompleted)
        {
            time.Advance(TimeSpan.FromMilliseconds(0.25));
            await Task.Yield();
        }

        ReadingTaken taken = Assert.Single(bench.Events.OfType<ReadingTaken>());
        Assert.Equal(4.0, taken.IntegrationMs);
        Assert.InRange(taken.TurnaroundMs, 1.0, taken.Ms - taken.StartMs - 4.0 + 1e-9);
        Assert.Equal(await reading, taken.Answer);
    }

    [Fact]
    public async Task A_voltage_beyond_the_range_is_an_overload()
    {
        await using SimulatedBenchHost bench = await Started.BenchAsync(new ExactBench { VoltageVolt = -2.0 });
        await using ModbusClient relays = Started.Client(bench, new ExactBench().RelayLink);
        await BoardPresentAsync(relays);
        await relays.WriteSingleCoilAsync(7, ExactBench.Supply.Coil, value: true, default);
        await relays.WriteSingleCoilAsync(7, ExactBench.Sense("A").Coil, value: true, default);
        await using IByteChannel channel = await bench.Channels.OpenAsync(MeterLink, default);
        await AskAsync(channel, "VOLT:NPLC 10;*OPC?");

        // Operate time and warm-up of this bench are 44 ms; the physics runs in real time here.
        await Task.Delay(100);
        Assert.Equal(-2.0, Volt(await AskAsync(channel, "VOLT:RANG 10;READ?")), 1e-6);

        // SCPI-1999 volume 1 section 7.2.1.4: negative infinity is -9.9E37.
        Assert.Equal(-9.9e37, Volt(await AskAsync(channel, "VOLT:RANG 1;READ?")), 1e30);
    }

    private static double Volt(string answer) => double.Parse(answer, NumberStyles.Float, CultureInfo.InvariantCulture);

    private static async Task BoardPresentAsync(ModbusClient relays)
    {
        while (!(await relays.ReadDiscreteInputsAsync(7, 16, 2, default)).All(on => on))
        {
            await Task.Delay(5);
        }
    }

    private static async Task<string> AskAsync(IByteChannel channel, string line)
    {
        await channel.WriteAsync(Encoding.ASCII.GetBytes(line + "\r\n"), default);
        using CancellationTokenSource limit = new(TimeSpan.FromSeconds(30));
        StringBuilder answer = new();
        var buffer = new byte[64];
        while (answer.Length == 0 || answer[^1] != '\n')
        {
            int count = await channel.ReadAsync(buffer, limit.Token);
            answer.Append(Encoding.ASCII.GetString(buffer, 0, count));
        }

        return answer.ToString().TrimEnd('\n');
    }
}
