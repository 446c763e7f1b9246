using System.Reflection;
using ImpedanceScreen.Bench;
using ImpedanceScreen.Instruments;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records;
using ImpedanceScreen.Screening.Lots;
using ImpedanceScreen.Screening.Status;
using ImpedanceScreen.Station.Commands;
using ImpedanceScreen.Station.Showing;
using ImpedanceScreen.Station.Simulated;
using Microsoft.Extensions.DependencyInjection;
using Microsoft.Extensions.Hosting;
using Microsoft.Extensions.Logging;
using Serilog;

namespace ImpedanceScreen.Station.Hosting;

/// <summary>Puts the parts together for one lot or one board, runs it and gives the exit code.</summary>
internal static class ScreeningSession
{
    // Longer than opening all relays over a doubtful link, shorter than the command's own limit.
    private static readonly TimeSpan ShutdownLimit = TimeSpan.FromSeconds(20);

    /// <summary>Version as it stands in records.</summary>
    public static string ProgramVersion { get; } =
        typeof(ScreeningSession).Assembly.GetCustomAttribute<AssemblyInformationalVersionAttribute>()!.InformationalVersion;

    public static async Task<int> RunAsync(
        RunRequest request, Func<ScreeningJob, SerialChoice> choose, bool single, CancellationToken cancellation)
    {
        ScreeningJob job = JobFiles.Load(request.LimitsPath, request.FixturePath);
        SerialChoice serials = choose(job);
        SessionChecks.Refuse(request, job.Fixture, serials);
        await using Serilog.Core.Logger log = StationLog.Make(StationLog.PathFor(request.StorePath, request.LogFolder));
        foreach (string warning in CalibrationWarnings.Of(job.Fixture))
        {
            log.Warning("{Warning}", warning);
            await Console.Error.WriteLineAsync(warning);
        }

        await using SimulatedBenchProcess? simulated = await StartSimulatedAsync(request, job, serials, cancellation);
        job = simulated is null ? job : job with { Fixture = simulated.Rewire(job.Fixture) };
        using FixtureLock held = FixtureLock.Take(job.Fixture);
        using var loggers = new Serilog.Extensions.Logging.SerilogLoggerFactory(log);
        ILogger<FixtureBench> benchLog = loggers.CreateLogger<FixtureBench>();
        await using var bench = new FixtureBench(
            job.Fixture, new ChannelFactory(TimeProvider.System, benchLog), TimeProvider.System, request.TimeScale, benchLog);

        // Before anything else, the store included: a process that died may have left relays closed.
        AllOpenOutcome opened = await bench.OpenAllAsync();
        if (!opened.Confirmed)
        {
            log.Error("relays not proved open at start: {Alarm}", opened.Alarm);
        }

        await using IRecordStore store = OpenStore(request.StorePath);
        return await WorkAsync(request, job, serials, single, bench, store, log, cancellation);
    }

    private static async Task<int> WorkAsync(
        RunRequest request, ScreeningJob job, SerialChoice serials, bool single, IBench bench, IRecordStore store,
        Serilog.Core.Logger log, CancellationToken cancellation)
    {
        var status = new StatusBoard(TimeProvider.System);
        using IResultView view = ResultViews.Choose(request, job, status, single);
        status.Recorded += view.Add;
        using IHost host = BuildHost(request, job, serials, single, bench, store, status, log);
        LotWorker worker = host.Services.GetServices<IHostedService>().OfType<LotWorker>().Single();
        long begun = TimeProvider.System.GetTimestamp();
        await host.RunAsync(cancellation);
        LotEnd? end = worker.End;
        view.End(end, TimeProvider.System.GetElapsedTime(begun));
        log.Information("ended: {End}", end);
        return CodeOf(end, single ? view.LastDisposition : null);
    }

    private static IHost BuildHost(
        RunRequest request, ScreeningJob job, SerialChoice serials, bool single, IBench bench, IRecordStore store,
        StatusBoard status, Serilog.Core.Logger log)
    {
        HostApplicationBuilder builder = Host.CreateEmptyApplicationBuilder(new HostApplicationBuilderSettings());
        builder.Services.AddSerilog(log);
        builder.Services.Configure<HostOptions>(options => options.ShutdownTimeout = ShutdownLimit);
        builder.Services.AddSingleton<IHostLifetime, CommandLifetime>();
        builder.Services.AddSingleton(bench);
        builder.Services.AddSingleton(store);
        builder.Services.AddSingleton(status);
        builder.Services.AddSingleton(new LotOrder(job, request.Lot, request.Operator, serials.Source, serials.BoardInNest, !single));
        builder.Services.AddSingleton(new RunSettings(
            ProgramVersion, request.TimeScale, TimeProvider.System, TaskScheduler.Default));
        builder.Services.AddSingleton<LotRunner>();
        builder.Services.AddHostedService<LotWorker>();
        return builder.Build();
    }

    private static async Task<SimulatedBenchProcess?> StartSimulatedAsync(
        RunRequest request, ScreeningJob job, SerialChoice serials, CancellationToken cancellation) =>
        request.Simulation is { } simulation
            ? await SimulatedBenchProcess.StartAsync(
                request, simulation, await StillToComeAsync(request, job, serials), serials.Boards, cancellation)
            : null;

    // A lot that is taken up again goes on with the boards it has not screened: so does its simulated handler.
    private static async Task<IReadOnlyList<string>> StillToComeAsync(
        RunRequest request, ScreeningJob job, SerialChoice serials)
    {
        await using IRecordStore store = OpenStore(request.StorePath);
        List<string> left = [];
        foreach (string serial in serials.Listed)
        {
            if (!await LotRunner.HasResultAsync(store, job.Limits.Product, serial, request.Lot))
            {
                left.Add(serial);
            }
        }

        return left;
    }

    private static RecordStore OpenStore(string path)
    {
        try
        {
            return RecordStore.Open(path);
        }
        catch (Exception e) when (e is IOException or InvalidOperationException)
        {
            throw new NotBegunException(e.Message, e);
        }
    }

    private static int CodeOf(LotEnd? end, Disposition? single) => end?.Kind switch
    {
        LotEndKind.Complete => single switch
        {
            null or Disposition.Pass => ExitCode.Done,
            Disposition.Fail => ExitCode.Wrong,
            _ => ExitCode.Retest,
        },
        LotEndKind.Stopped => ExitCode.Stopped,
        LotEndKind.StoreFault => ExitCode.StoreFault,
        _ => ExitCode.OnHold,
    };
}
