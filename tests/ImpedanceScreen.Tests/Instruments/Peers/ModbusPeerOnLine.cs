using ImpedanceScreen.Instruments.Channels;
using Microsoft.Extensions.Logging.Abstractions;

namespace ImpedanceScreen.Tests.Instruments.Peers;

/// <summary>The peer of this process at the far end of a serial line.</summary>
internal sealed class ModbusPeerOnLine : IAsyncDisposable
{
    private readonly SerialChannel far;

    private ModbusPeerOnLine(TerminalPair line, SerialChannel far)
    {
        Line = line;
        this.far = far;
        _ = Task.Run(ServeAsync);
    }

    public TerminalPair Line { get; }

    public static async Task<ModbusPeerOnLine> OpenAsync()
    {
        TerminalPair line = await TerminalPair.OpenAsync();
        return new(line, SerialChannel.Open(TestLinks.Serial(line.Far), TimeProvider.System, NullLogger.Instance));
    }

    public async ValueTask DisposeAsync()
    {
        await far.DisposeAsync();
        await Line.DisposeAsync();
    }

    private async Task ServeAsync()
    {
        try
        {
            await new ModbusPeer(serial: true).ServeAsync(far);
        }
        catch (LinkLostException)
        {
            // The line was cut.
        }
    }
}
