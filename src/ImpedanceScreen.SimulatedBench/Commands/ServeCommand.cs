using System.CommandLine;
using System.Text.Json;

namespace ImpedanceScreen.SimulatedBench.Commands;

/// <summary>The one command: serve a simulated bench until standard input closes.</summary>
internal static class ServeCommand
{
    private const int RefusedExitCode = 2;

    public static RootCommand Make()
    {
        var options = new ServeOptions();
        var command = new RootCommand(
            "Serves a simulated relay fixture, meters, boards and handler over Modbus and SCPI. Prints one JSON line with "
            + "the address of each link, then reads lines from standard input (interlock open, interlock close, lift, "
            + "next) and ends when it closes.");
        options.AddTo(command);
        command.SetAction((parsed, cancellation) => ServeAsync(options.Read(parsed), cancellation));
        return command;
    }

    private static async Task<int> ServeAsync(ServeRequest request, CancellationToken cancellation)
    {
        // Signals are heeded only once this method has given control back: no address is told before.
        await Task.Yield();
        try
        {
            using TextWriter? truth = BenchFiles.Create(request.TruthPath);
            using TextWriter? log = BenchFiles.Create(request.LogPath);
            SimulatedBenchOptions options = BenchFiles.Load(request) with { Truth = truth, Log = log };
            await using SimulatedBenchHost host = await SimulatedBenchHost.StartAsync(options);
            await Console.Out.WriteLineAsync(JsonSerializer.Serialize(host.Addresses));
            await Console.Out.FlushAsync(cancellation);
            Task ended = await Task.WhenAny(
                ControlLines.FollowAsync(host, Console.In, Console.Error), host.Failure, Cancelled(cancellation));
            await ended;
            return 0;
        }
        catch (BenchStartException e)
        {
            await Console.Error.WriteLineAsync(e.Message);
            return RefusedExitCode;
        }
    }

    // A signal is an ordinary end.
    private static Task Cancelled(CancellationToken cancellation)
    {
        var cancelled = new TaskCompletionSource(TaskCreationOptions.RunContinuationsAsynchronously);
        cancellation.Register(() => cancelled.TrySetResult());
        return cancelled.Task;
    }
}
