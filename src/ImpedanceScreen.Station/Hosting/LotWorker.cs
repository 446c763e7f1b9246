using ImpedanceScreen.Screening.Lots;
using Microsoft.Extensions.Hosting;
using Microsoft.Extensions.Logging;

namespace ImpedanceScreen.Station.Hosting;

/// <summary>Works one lot and ends the host with it.</summary>
internal sealed class LotWorker(LotRunner runner, IHostApplicationLifetime lifetime, ILogger<LotWorker> log)
    : BackgroundService
{
    /// <summary>How the lot ended; null while it runs or where an unforeseen error ended it.</summary>
    public LotEnd? End { get; private set; }

    protected override async Task ExecuteAsync(CancellationToken stoppingToken)
    {
        // An exception that left this method would stop the host with exit code 0.
        try
        {
            End = await runner.RunAsync(stoppingToken);
        }
#pragma warning disable CA1031 // The top of the bench loop: whatever it is, it is logged and becomes the exit code.
        catch (Exception e)
#pragma warning restore CA1031
        {
            log.LogCritical(e, "the bench loop ended by an unforeseen error");
        }
        finally
        {
            lifetime.StopApplication();
        }
    }
}
