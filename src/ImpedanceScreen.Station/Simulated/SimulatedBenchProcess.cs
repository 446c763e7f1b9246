using System.Diagnostics;
using System.Globalization;
using System.Text.Json;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Station.Commands;

namespace ImpedanceScreen.Station.Simulated;

/// <summary>
/// The simulated bench's executable, started beside the station; it ends when its standard input closes.
/// </summary>
internal sealed class SimulatedBenchProcess : IAsyncDisposable
{
    private const int StartLimitMs = 20_000;
    private const int EndLimitMs = 5_000;

    private readonly Process process;
    private readonly Dictionary<string, string> addresses;

    private SimulatedBenchProcess(Process process, Dictionary<string, string> addresses)
    {
        this.process = process;
        this.addresses = addresses;
    }

    /// <summary>Path of the executable that is built beside the station.</summary>
    public static string ExecutablePath { get; } =
        Path.Combine(AppContext.BaseDirectory, "simulated-bench", "ImpedanceScreen.SimulatedBench.dll");

    /// <exception cref="NotBegunException">It does not start.</exception>
    public static async Task<SimulatedBenchProcess> StartAsync(
        RunRequest request, SimulationRequest simulation, IReadOnlyList<string> labels, int? boards,
        CancellationToken cancellation)
    {
        ProcessStartInfo start = StartInfo();
        string[] arguments =
        [
            "--fixture", request.FixturePath,
            "--limits", request.LimitsPath,
            "--population", simulation.PopulationPath,
            "--seed", simulation.Seed.ToString(CultureInfo.InvariantCulture),
            "--time-scale", request.TimeScale.ToString(CultureInfo.InvariantCulture),
            "--truth", request.TruthPath,
            "--free-ports",
        ];
        Array.ForEach(arguments, start.ArgumentList.Add);
        AddOptional(start, "--first-serial", labels.Count > 0 ? labels[0] : null);
        AddOptional(start, "--boards", boards?.ToString(CultureInfo.InvariantCulture));
        AddOptional(start, "--log", simulation.BenchLogPath);
        Process started = Process.Start(start)
            ?? throw new NotBegunException($"the simulated bench did not start: {start.FileName}");
        try
        {
            using var limit = new CancellationTokenSource(TimeSpan.FromMilliseconds(StartLimitMs), TimeProvider.System);
            using var both = CancellationTokenSource.CreateLinkedTokenSource(cancellation, limit.Token);
            string? line = await started.StandardOutput.ReadLineAsync(both.Token);
            return new SimulatedBenchProcess(started, Addresses(line));
        }
        catch (Exception e) when (e is JsonException or OperationCanceledException or NotBegunException)
        {
            started.Kill();
            started.Dispose();
            cancellation.ThrowIfCancellationRequested();
            throw new NotBegunException("the simulated bench did not come up; its words stand above", e);
        }
    }

    /// <summary>Runs it in the foreground with a person's own arguments.</summary>
    public static async Task<int> RunAsync(IEnumerable<string> arguments, CancellationToken cancellation)
    {
        ProcessStartInfo start = StartInfo();
        start.RedirectStandardOutput = false;
        start.RedirectStandardInput = false;
        foreach (string argument in arguments)
        {
            start.ArgumentList.Add(argument);
        }

        using Process started = Process.Start(start)
            ?? throw new NotBegunException($"the simulated bench did not start: {start.FileName}");
        try
        {
            await started.WaitForExitAsync(cancellation);
            return started.ExitCode;
        }
        catch (OperationCanceledException)
        {
            // A signal from a terminal reached it too; one that was sent to this process alone did not.
            started.Kill();
            throw;
        }
    }

    /// <summary>The same fixture with the addresses that the simulated bench listens on.</summary>
    public FixtureFile Rewire(FixtureFile fixture) =>
        fixture with
        {
            Links = [.. fixture.Links.Select(link => link is TcpLink tcp ? Rewire(tcp) : link)],
        };

    /// <inheritdoc/>
    public async ValueTask DisposeAsync()
    {
        process.StandardInput.Close();
        using var limit = new CancellationTokenSource(TimeSpan.FromMilliseconds(EndLimitMs), TimeProvider.System);
        try
        {
            await process.WaitForExitAsync(limit.Token);
        }
        catch (OperationCanceledException)
        {
            process.Kill();
        }

        process.Dispose();
    }

    private TcpLink Rewire(TcpLink link)
    {
        string address = addresses[link.Name];
        int colon = address.LastIndexOf(':');
        return link with
        {
            Host = address[..colon],
            Port = int.Parse(address.AsSpan(colon + 1), NumberStyles.None, CultureInfo.InvariantCulture),
        };
    }

    private static Dictionary<string, string> Addresses(string? line) =>
        line is null
            ? throw new NotBegunException("the simulated bench ended at once")
            : JsonSerializer.Deserialize<Dictionary<string, string>>(line)
                ?? throw new JsonException("no addresses");

    private static ProcessStartInfo StartInfo()
    {
        if (!File.Exists(ExecutablePath))
        {
            throw new NotBegunException($"the simulated bench is missing: {ExecutablePath}; build the whole solution");
        }

        return new ProcessStartInfo(Environment.ProcessPath is { } path && IsDotnet(path) ? path : "dotnet")
        {
            ArgumentList = { ExecutablePath },
            RedirectStandardInput = true,
            RedirectStandardOutput = true,
            UseShellExecute = false,
        };
    }

    private static bool IsDotnet(string path) => Path.GetFileNameWithoutExtension(path) == "dotnet";

    private static void AddOptional(ProcessStartInfo start, string option, string? value)
    {
        if (value is not null)
        {
            start.ArgumentList.Add(option);
            start.ArgumentList.Add(value);
        }
    }
}
