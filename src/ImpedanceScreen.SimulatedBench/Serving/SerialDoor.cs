using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using Microsoft.Extensions.Logging.Abstractions;

namespace ImpedanceScreen.SimulatedBench.Serving;

/// <summary>Serves the far end of a serial link; opens the port again when the other side hung up.</summary>
internal sealed class SerialDoor(SerialLink farEnd, ILinkServer server, TimeProvider time)
{
    private static readonly TimeSpan Pause = TimeSpan.FromMilliseconds(100);

    /// <summary>The device.</summary>
    public string Address => farEnd.Device;

    public async Task RunAsync(CancellationToken cancellation)
    {
        while (true)
        {
            try
            {
                await using SerialChannel channel = SerialChannel.Open(farEnd, time, NullLogger.Instance);
                await server.ServeAsync(channel, cancellation);
            }
            catch (LinkLostException)
            {
                // The port is not there or its other side went: tried again until the bench ends.
                await Task.Delay(Pause, time, cancellation);
            }
        }
    }
}
