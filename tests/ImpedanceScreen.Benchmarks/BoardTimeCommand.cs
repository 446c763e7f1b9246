using System.Globalization;
using ImpedanceScreen.Benchmarks.BoardTime;

namespace ImpedanceScreen.Benchmarks;

/// <summary>
/// Board time over the bench floor in real time: from busy on to done on, as the simulated bench logs it, over what the
/// bench itself needs.
/// </summary>
internal sealed class BoardTimeCommand : IFigureCommand
{
    private const double SequentialMost = 1.03;
    private const double OverlappedMost = 1.10;

    public string Name => "board-time";

    public string Description => "Board time over the bench floor, real time, sequential and with a load bank an output.";

    public int DefaultCount => 24;

    public async Task<int> RunAsync(int count, ulong seed, CancellationToken cancellation)
    {
        IReadOnlyList<BoardSpan> sequential = await TimedLot.RunAsync("simulated-bench.yaml", count, seed);
        IReadOnlyList<BoardSpan> overlapped = await TimedLot.RunAsync("simulated-own-banks.yaml", count, seed);
        bool good = Report("one load bank, sequential: over waits and readings", sequential, span => span.OverFloor, SequentialMost);
        good &= Report("a load bank an output: over readings and sense switching", overlapped, span => span.OverReadings, OverlappedMost);
        return good ? 0 : 1;
    }

    private static bool Report(
        string what, IReadOnlyList<BoardSpan> spans, Func<BoardSpan, double> ratio, double most)
    {
        double[] ratios = [.. spans.Select(ratio).Order()];
        double median = (ratios[(ratios.Length - 1) / 2] + ratios[ratios.Length / 2]) / 2;
        double high = ratios[(int)Math.Ceiling(0.9 * ratios.Length) - 1];
        double seconds = spans.Select(span => span.Board.TotalSeconds).Order().ElementAt(spans.Count / 2);
        bool good = median <= most && high <= most && ratios[0] >= 1;
        Console.WriteLine(string.Create(
            CultureInfo.InvariantCulture,
            $"{what}: {spans.Count} boards, median {seconds:0.00} s; ratio least {ratios[0]:0.000}, median {median:0.000}, "
            + $"90th percentile {high:0.000}; at most {most:0.00}: {(good ? "reached" : "MISSED")}"));
        return good;
    }
}
