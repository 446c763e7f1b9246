using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Instruments.Scpi;
using Microsoft.Extensions.Logging.Abstractions;

namespace ImpedanceScreen.Tests.Instruments.Peers;

/// <summary>A meter at the far end of a real serial port, in real time.</summary>
[Collection(RealTime.Name)]
public sealed class ScpiSerialTests
{
    [Fact]
    public async Task A_meter_on_a_serial_line_reads_and_recovers_from_a_cancelled_reading()
    {
        await using TerminalPair line = await TerminalPair.OpenAsync();
        MeterPeer peer = new() { Terminator = "\r\n" };
        await using SerialChannel far =
            SerialChannel.Open(TestLinks.Serial(line.Far), TimeProvider.System, NullLogger.Instance);
        Task serving = ServeAsync(peer, far);
        SerialLink link = TestLinks.Serial(line.Near);
        ChannelFactory channels = new(TimeProvider.System, NullLogger.Instance);
        await using ScpiMeter meter = new(TestBench.Meter, link, channels, TimeProvider.System, NullLogger.Instance);

        Assert.Equal(MeterPeer.DefaultIdentity, await meter.StartAsync(CancellationToken.None));
        await meter.SetRangeAsync(TestBench.TenVolt, CancellationToken.None);
        for (int i = 1; i <= 20; i++)
        {
            Assert.Equal(i, (await meter.ReadAsync(1, CancellationToken.None))[0].Volt);
            await peer.ReceivedAsync();
        }

        peer.NextAnswers.Enqueue(null);
        using CancellationTokenSource caller = new();
        Task cancelled = meter.ReadAsync(1, caller.Token);
        await peer.ReceivedAsync();
        await caller.CancelAsync();
        await Assert.ThrowsAnyAsync<OperationCanceledException>(() => cancelled);
        await peer.SendAsync("+7.77000000E+00\r\n");

        Assert.Equal(22.0, (await meter.ReadAsync(1, CancellationToken.None))[0].Volt);
        await far.DisposeAsync();
        await serving;
    }

    private static async Task ServeAsync(MeterPeer peer, SerialChannel far)
    {
        try
        {
            await peer.ServeAsync(far);
        }
        catch (LinkLostException)
        {
            // The test is over.
        }
    }
}
