using Microsoft.Extensions.Hosting;

namespace ImpedanceScreen.Station.Hosting;

/// <summary>
/// The command line owns the signals; the host follows the command's token and listens to none itself.
/// </summary>
internal sealed class CommandLifetime : IHostLifetime
{
    public Task WaitForStartAsync(CancellationToken cancellationToken) => Task.CompletedTask;

    public Task StopAsync(CancellationToken cancellationToken) => Task.CompletedTask;
}
