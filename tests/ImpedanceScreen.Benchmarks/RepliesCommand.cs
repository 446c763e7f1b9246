using System.Diagnostics;
using System.Globalization;
using ImpedanceScreen.Benchmarks.Replies;

namespace ImpedanceScreen.Benchmarks;

/// <summary>Random and mutated replies into the Modbus and SCPI parsers.</summary>
internal sealed class RepliesCommand : IFigureCommand
{
    public string Name => "replies";

    public string Description =>
        "Random and mutated replies into the Modbus and SCPI parsers: none hangs or throws anything but typed errors.";

    public int DefaultCount => 1_000_000;

    public async Task<int> RunAsync(int count, ulong seed, CancellationToken cancellation)
    {
        ReplyRun run = new(count, seed);
        long started = Stopwatch.GetTimestamp();
        await run.RunAsync(cancellation);
        double seconds = Stopwatch.GetElapsedTime(started).TotalSeconds;
        if (run.Failure is { } failure)
        {
            Console.WriteLine(failure);
        }

        Console.WriteLine(string.Create(
            CultureInfo.InvariantCulture,
            $"replies {run.Done} of {count}, seed {seed}: {run.Answers} answers, {run.TypedErrors} typed errors, "
            + $"{(run.Failure is null ? 0 : 1)} other; {run.Done / seconds:F0} a second"));
        return run.Failure is null && run.Done == count ? 0 : 1;
    }
}
