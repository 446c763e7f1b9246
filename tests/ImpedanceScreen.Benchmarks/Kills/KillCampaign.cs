using System.Globalization;
using ImpedanceScreen.Benchmarks.Programs;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Benchmarks.Kills;

/// <summary>
/// Screens lots on a bench that outlives the station, kills the station with SIGKILL at random instants and starts it
/// again with the same command, until all kills are spent and the lot is complete.
/// </summary>
internal sealed class KillCampaign : IAsyncDisposable
{
    private const int LotBoards = 8;
    private const double TimeScale = 0.05;
    private const int HoldExitCode = 4;

    // Longer than starting the program and screening two boards.
    private static readonly TimeSpan LongestLife = TimeSpan.FromSeconds(2.5);
    private static readonly TimeSpan NoStep = TimeSpan.FromSeconds(20);

    private readonly OutlivingBench bench;
    private readonly KillJudge judge;
    private readonly Random random;
    private int lot = 1;
    private int kills;
    private int atHandshake;
    private int holds;

    private KillCampaign(OutlivingBench bench, int seed)
    {
        this.bench = bench;
        judge = new KillJudge(bench);
        random = new Random(seed);
    }

    /// <summary>Runs a campaign.</summary>
    public static async Task<KillReport> RunAsync(int wanted, ulong seed, CancellationToken cancellation)
    {
        await using var campaign = new KillCampaign(await OutlivingBench.StartAsync(seed, TimeScale), (int)seed);
        return await campaign.RunAsync(wanted, cancellation);
    }

    /// <inheritdoc/>
    public ValueTask DisposeAsync() => bench.DisposeAsync();

    private async Task<KillReport> RunAsync(int wanted, CancellationToken cancellation)
    {
        string? inNest = null;
        while (true)
        {
            judge.Starting();
            using StationProgram station = StationProgram.Start(Arguments(inNest));
            inNest = null;
            Task end = kills < wanted ? Task.WhenAny(station.Ended, MomentAsync(cancellation)) : station.Ended;
            await end.WaitAsync(cancellation);
            if (!station.Ended.IsCompleted)
            {
                station.Kill();
                kills++;
            }

            ProgramEnd left = await station.Ended;
            await judge.LookAsync();
            if (left.ExitCode == 0 && kills == wanted)
            {
                return await judge.ReportAsync(kills, atHandshake, holds);
            }

            inNest = Next(left);
            await PauseAsync(cancellation);
        }
    }

    // What a person does about how the station ended; gives the serial number read off the board where it was asked.
    private string? Next(ProgramEnd left)
    {
        switch (left.ExitCode)
        {
            case 0:
                lot++;
                return null;
            case HoldExitCode:
                holds++;
                return bench.InNest;
            case 137:
                return null;
            default:
                throw new InvalidOperationException($"the station ended with {left.ExitCode}: {left.Errors}");
        }
    }

    private string[] Arguments(string? inNest)
    {
        string first = string.Create(CultureInfo.InvariantCulture, $"T6-{((lot - 1) * LotBoards) + 1:000000}");
        string[] named = inNest is null ? [] : ["--board-in-nest", inNest];
        return bench.Arguments(
            "lot",
            [
                "--lot", string.Create(CultureInfo.InvariantCulture, $"lot-{lot}"), "--first-serial", first, "--count",
                LotBoards.ToString(CultureInfo.InvariantCulture), .. named,
            ]);
    }

    // Half of the instants are uniform over the life of the program; half follow a step of the handshake within some
    // milliseconds, where a record and its sorting lie close together.
    private async Task MomentAsync(CancellationToken cancellation)
    {
        if (random.Next(2) == 0)
        {
            await Task.Delay(random.NextDouble() * LongestLife, cancellation);
            return;
        }

        atHandshake++;
        Task step = bench.Lines.NextAsync(Steps()[random.Next(Steps().Length)]);
        await Task.WhenAny(step, Task.Delay(NoStep, cancellation));
        await Task.Delay(TimeSpan.FromMilliseconds(random.Next(15)), cancellation);
    }

    private string[] Steps()
    {
        Handshake coils = bench.Job.Fixture.Handshake!;
        return
        [
            LineTrigger.On(coils.Busy), LineTrigger.On(coils.PassBin), LineTrigger.On(coils.Done),
            LineTrigger.Off(coils.Done), LineTrigger.Off(coils.Busy),
            LineTrigger.Off(bench.Job.Fixture.BoardSupply!.Relay), "\"board-lifted\"",
        ];
    }

    // Half the time the next start comes before the relay units' own watchdogs have opened anything; otherwise after
    // all of them have, those that hold the handshake included.
    private async Task PauseAsync(CancellationToken cancellation)
    {
        if (random.Next(2) == 0)
        {
            return;
        }

        await judge.AwaitWatchdogsAsync(cancellation);
        await Task.Delay(bench.Job.Fixture.RelayUnits.Max(unit => unit.WatchdogSilence!.Value), cancellation);
    }
}
