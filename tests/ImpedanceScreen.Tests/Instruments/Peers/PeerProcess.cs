using System.ComponentModel;
using System.Diagnostics;
using System.Net;
using System.Net.Sockets;

namespace ImpedanceScreen.Tests.Instruments.Peers;

/// <summary>A program that a test started. A missing program fails the test and says what to install.</summary>
internal sealed class PeerProcess : IAsyncDisposable
{
    private static readonly TimeSpan Patience = TimeSpan.FromSeconds(30);
    private readonly Process process;
    private bool disposed;

    private PeerProcess(Process process) => this.process = process;

    public static string Folder => Path.Combine(AppContext.BaseDirectory, "Instruments", "Peers");

    /// <summary>Starts a program and waits for its first line.</summary>
    public static async Task<PeerProcess> StartAsync(string package, string program, params string[] arguments)
    {
        PeerProcess peer = Start(package, program, arguments);
        Task<string?> line = peer.process.StandardOutput.ReadLineAsync().WaitAsync(Patience);
        return await line is "ready"
            ? peer
            : throw new InvalidOperationException(
                $"{program} did not start: {await peer.process.StandardError.ReadToEndAsync()} {Cure(package)}");
    }

    /// <summary>Starts a program and waits until something is true.</summary>
    public static async Task<PeerProcess> StartUntilAsync(
        Func<bool> ready, string package, string program, params string[] arguments)
    {
        PeerProcess peer = Start(package, program, arguments);
        long started = Stopwatch.GetTimestamp();
        while (!ready())
        {
            if (peer.process.HasExited || Stopwatch.GetElapsedTime(started) > Patience)
            {
                throw new InvalidOperationException($"{program} did not start. {Cure(package)}");
            }

            await Task.Delay(5);
        }

        return peer;
    }

    /// <summary>Runs a program to its end.</summary>
    public static async Task RunAsync(string package, string program, params string[] arguments)
    {
        await using PeerProcess peer = Start(package, program, arguments);
        Task<string> errors = peer.process.StandardError.ReadToEndAsync();
        await peer.process.WaitForExitAsync().WaitAsync(Patience);
        if (peer.process.ExitCode != 0)
        {
            throw new InvalidOperationException($"{program} failed: {await errors} {Cure(package)}");
        }
    }

    /// <summary>A TCP port of this machine that is free now.</summary>
    public static int FreePort()
    {
        using TcpListener listener = new(IPAddress.Loopback, 0);
        listener.Start();
        return ((IPEndPoint)listener.LocalEndpoint).Port;
    }

    public async ValueTask DisposeAsync()
    {
        if (disposed)
        {
            return;
        }

        disposed = true;
        if (!process.HasExited)
        {
            process.Kill(entireProcessTree: true);
            await process.WaitForExitAsync();
        }

        process.Dispose();
    }

    private static string Cure(string package) =>
        $"Install what is missing: apt-get install -y --no-install-recommends {package}";

    private static PeerProcess Start(string package, string program, string[] arguments)
    {
        ProcessStartInfo start = new(program, arguments)
        {
            RedirectStandardOutput = true,
            RedirectStandardError = true,
            UseShellExecute = false,
        };
        try
        {
            return new PeerProcess(
                Process.Start(start) ?? throw new InvalidOperationException($"{program} did not start."));
        }
        catch (Win32Exception e)
        {
            throw new InvalidOperationException($"{program} is not there. {Cure(package)}", e);
        }
    }
}
