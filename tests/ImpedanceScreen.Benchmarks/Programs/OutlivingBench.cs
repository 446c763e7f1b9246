using System.Globalization;
using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.SimulatedBench;
using ImpedanceScreen.SimulatedBench.Logging;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.Benchmarks.Programs;

/// <summary>
/// The simulated bench on free ports of this process, so that it outlives every station that is ended; with a fixture
/// file that names those ports and a store of its own.
/// </summary>
internal sealed class OutlivingBench : IAsyncDisposable
{
    private readonly SimulatedBenchHost host;
    private readonly double timeScale;

    private OutlivingBench(SimulatedBenchHost host, ScreeningJob job, LineTrigger lines, string folder, double timeScale)
    {
        this.host = host;
        this.timeScale = timeScale;
        Job = job;
        Lines = lines;
        Folder = folder;
    }

    /// <summary>What is screened.</summary>
    public ScreeningJob Job { get; }

    /// <summary>Tells of events as they happen.</summary>
    public LineTrigger Lines { get; }

    /// <summary>Folder of the store, the fixture file and the station's log; removed in the end.</summary>
    public string Folder { get; }

    /// <summary>The store.</summary>
    public string Store => Path.Combine(Folder, "records.db");

    /// <summary>The fixture file with the ports that are listened on.</summary>
    public string Fixture => Path.Combine(Folder, "bench.yaml");

    /// <summary>What happened at the bench so far, oldest first.</summary>
    public IReadOnlyList<BenchEvent> Events => host.Events;

    /// <summary>Serial number on the label of the board in the nest; null where none is.</summary>
    public string? InNest => Events.LastOrDefault(each => each is BoardPresented or BoardLifted) is BoardPresented board
        ? board.Label
        : null;

    /// <summary>Starts the shipped Tern-6 bench and makes the store.</summary>
    public static async Task<OutlivingBench> StartAsync(ulong seed, double timeScale, string firstSerial = "T6-000001")
    {
        string folder = Directory.CreateTempSubdirectory("station-").FullName;
        LimitFile limits = LimitFileBinder.Bind(Text("limits/tern-6.yaml")).Value;
        FileText fixtureText = Text("fixtures/simulated-bench.yaml");
        ScreeningJob job = JobBinder.Bind(limits, FixtureFileBinder.Bind(fixtureText).Value).Value;
        var lines = new LineTrigger();
        SimulatedBenchHost started = await SimulatedBenchHost.StartAsync(
            new SimulatedBenchOptions(
                job, PopulationFileBinder.Bind(Text("fixtures/tern-6-population.yaml"), limits).Value, seed)
            {
                TimeScale = timeScale, FirstSerial = firstSerial, Listening = Listening.OnFreePorts, Log = lines,
            });
        var bench = new OutlivingBench(started, job, lines, folder, timeScale);
        await File.WriteAllTextAsync(bench.Fixture, Adapted(fixtureText.Text, job.Fixture, started.Addresses));
        ProgramEnd made = await StationProgram.RunAsync(
            ["store-create", "--store", bench.Store, "--station", "station-1"]);
        return made.ExitCode == 0 ? bench : throw new InvalidOperationException(made.Errors);
    }

    /// <summary>The command line that screens on this bench.</summary>
    public string[] Arguments(string command, params string[] further) =>
    [
        command, "--fixture", Fixture, "--limits", Repository.File("limits", "tern-6.yaml"), "--store", Store, "--time-scale",
        timeScale.ToString(CultureInfo.InvariantCulture), "--json", .. further,
    ];

    /// <summary>Opens the interlock.</summary>
    public void OpenInterlock() => host.OpenInterlock();

    /// <summary>The load, selector, sense, stimulus and supply coils that are on after some events.</summary>
    public HashSet<(string Unit, ushort Coil)> Closed(IEnumerable<BenchEvent> events)
    {
        HashSet<(string, ushort)> switching =
            [.. FixtureRelays.Switching(Job.Fixture).Select(relay => (relay.Unit, relay.Coil))];
        HashSet<(string, ushort)> closed = [];
        foreach (CoilChanged coil in events.OfType<CoilChanged>())
        {
            if (!coil.On)
            {
                closed.Remove((coil.Unit, coil.Coil));
            }
            else if (switching.Contains((coil.Unit, coil.Coil)))
            {
                closed.Add((coil.Unit, coil.Coil));
            }
        }

        return closed;
    }

    /// <inheritdoc/>
    public async ValueTask DisposeAsync()
    {
        await host.DisposeAsync();
        Directory.Delete(Folder, recursive: true);
    }

    private static FileText Text(string name) => new(name, File.ReadAllText(Repository.File(name)));

    // Free ports lie far above the declared ones: one replacement cannot meet the other. A machine that is busy with
    // other work must not look like a lost instrument.
    private static string Adapted(string text, FixtureFile fixture, IReadOnlyDictionary<string, string> addresses) =>
        fixture.Links.OfType<TcpLink>()
            .Aggregate(text, (changed, link) => changed.Replace(
                string.Create(CultureInfo.InvariantCulture, $"port: {link.Port}"),
                $"port: {addresses[link.Name].Split(':')[^1]}",
                StringComparison.Ordinal))
            .Replace("timeout_ms: 250", "timeout_ms: 3000", StringComparison.Ordinal);
}
