using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.SimulatedBench.Handling;
using ImpedanceScreen.SimulatedBench.Logging;
using ImpedanceScreen.SimulatedBench.Populations;
using ImpedanceScreen.SimulatedBench.Serving;

namespace ImpedanceScreen.SimulatedBench;

/// <summary>A running simulated bench: relay units, meters, boards and a handler behind the links of a fixture
/// file.</summary>
/// <remarks>Safe to use from any thread.</remarks>
public sealed class SimulatedBenchHost : IAsyncDisposable
{
    private readonly CancellationTokenSource ending = new();
    private readonly BenchModel model;
    private readonly BenchLog log;
    private readonly Handler handler;
    private readonly LinkServers servers;
    private readonly MemoryLinks memory;
    private readonly List<TcpDoor> tcpDoors = [];
    private readonly List<Task> running = [];
    private readonly Dictionary<string, string> addresses = [];

    private SimulatedBenchHost(SimulatedBenchOptions options)
    {
        BenchClock clock = new(options.Time, options.TimeScale);
        FixtureFile fixture = options.Job.Fixture;
        log = new BenchLog(clock, options.Log);
        model = new BenchModel(options.Job, options.Population.Surroundings, options.Seed, clock, log);
        servers = new LinkServers(model, fixture);
        memory = new MemoryLinks(servers, ending.Token);
        handler = new Handler(
            model,
            fixture,
            new BoardFactory(options.Population, options.Seed, options.FirstSerial),
            options.Population.Surroundings,
            options.Boards,
            options.Truth is { } truth ? new TruthFile(options.Job.Limits, truth) : null);
    }

    /// <summary>Where each link is listened on, by its name: <c>host:port</c> or a device.</summary>
    public IReadOnlyDictionary<string, string> Addresses => addresses;

    /// <summary>Opens in-memory channels to the bench, in place of sockets and ports.</summary>
    public IChannelFactory Channels => memory;

    /// <summary>What happened so far, oldest first.</summary>
    public IReadOnlyList<BenchEvent> Events => log.Events;

    /// <summary>Ends only when a part of the bench fails, with its exception.</summary>
    public Task Failure { get; private set; } = Task.CompletedTask;

    /// <summary>Starts a bench; it is ready when the task completes.</summary>
    /// <exception cref="BenchStartException">It cannot be served as the fixture file says.</exception>
    public static async Task<SimulatedBenchHost> StartAsync(SimulatedBenchOptions options)
    {
        ArgumentNullException.ThrowIfNull(options);
        var host = new SimulatedBenchHost(options);
        try
        {
            host.Run(options);
            return host;
        }
        catch (BenchStartException)
        {
            await host.DisposeAsync();
            throw;
        }
    }

    /// <summary>Opens the interlock: the contact cuts the supply of the relay coils.</summary>
    public void OpenInterlock() => model.SetInterlock(closed: false);

    /// <summary>Closes the interlock.</summary>
    public void CloseInterlock() => model.SetInterlock(closed: true);

    /// <summary>Takes the board out of the nest by hand, whatever the bench is doing.</summary>
    public void Lift() => handler.Lift();

    /// <summary>Takes the board away and puts the next one in, on a fixture without handshake.</summary>
    public void Replace() => handler.Replace();

    /// <inheritdoc/>
    public async ValueTask DisposeAsync()
    {
        await ending.CancelAsync();
        tcpDoors.ForEach(door => door.Dispose());
        await memory.WhenAllServedAsync();
        await Task.WhenAll(running).ContinueWith(
            _ => { }, CancellationToken.None, TaskContinuationOptions.None, TaskScheduler.Default);
        servers.Dispose();
        ending.Dispose();
    }

    private void Run(SimulatedBenchOptions options)
    {
        if (options.Listening != Listening.Nowhere)
        {
            foreach (Link link in options.Job.Fixture.Links)
            {
                Listen(link, options);
            }
        }

        running.AddRange(model.Watchdogs.Select(watchdog => watchdog.RunAsync(ending.Token)));
        running.Add(handler.RunAsync(ending.Token));
        Failure = FirstFailureAsync();
    }

    private void Listen(Link link, SimulatedBenchOptions options)
    {
        ILinkServer server = servers[link.Name];
        switch (link)
        {
            case TcpLink tcp:
                TcpDoor tcpDoor = new(tcp, server, options.Listening == Listening.OnFreePorts);
                tcpDoors.Add(tcpDoor);
                addresses[link.Name] = tcpDoor.Address;
                running.Add(tcpDoor.RunAsync(ending.Token));
                break;
            case SerialLink serial when options.SerialDevices.TryGetValue(link.Name, out string? device):
                SerialDoor serialDoor = new(serial with { Device = device }, server, options.Time);
                addresses[link.Name] = serialDoor.Address;
                running.Add(serialDoor.RunAsync(ending.Token));
                break;
            default:
                throw new BenchStartException(
                    $"link '{link.Name}' is a serial line: name its far end with --serial {link.Name}=DEVICE");
        }
    }

    private async Task FirstFailureAsync()
    {
        List<Task> left = [.. running];
        while (left.Count > 0)
        {
            Task ended = await Task.WhenAny(left);
            left.Remove(ended);
            if (ended.IsFaulted)
            {
                await ended;
            }
        }
    }
}
