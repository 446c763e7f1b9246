using System.Globalization;
using ImpedanceScreen.Benchmarks.Programs;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Benchmarks.Durability;

/// <summary>A lot whose station runs under strace.</summary>
internal static class TracedLot
{
    private const double TimeScale = 0.05;

    /// <summary>Screens boards and judges the trace.</summary>
    /// <exception cref="InvalidOperationException">The lot did not end well.</exception>
    public static async Task<SortingReport> RunAsync(int boards, ulong seed)
    {
        await using OutlivingBench bench = await OutlivingBench.StartAsync(seed, TimeScale);
        string trace = Path.Combine(bench.Folder, "calls.txt");
        using StationProgram station = StationProgram.Start(
            bench.Arguments(
                "lot", "--lot", "traced", "--first-serial", "T6-000001", "--count",
                boards.ToString(CultureInfo.InvariantCulture)),
            through: ["strace", "-f", "-yy", "-x", "-s", "300", "-e", $"trace={SystemCallTrace.Calls}", "-o", trace]);
        ProgramEnd end = await station.Ended;
        if (end.ExitCode != 0 || end.Lines.Length != boards)
        {
            throw new InvalidOperationException($"the lot ended with {end.ExitCode}: {end.Errors}");
        }

        FixtureFile fixture = Bound(bench);
        string unit = fixture.Handshake!.Done.Unit;
        string link = fixture.RelayUnits.First(each => each.Name == unit).Link;
        int port = fixture.Links.OfType<TcpLink>().First(each => each.Name == link).Port;
        return SortingOrder.Judge(SystemCallTrace.Read(File.ReadLines(trace)), fixture, port);
    }

    // With the ports that are really used.
    private static FixtureFile Bound(OutlivingBench bench) =>
        FixtureFileBinder.Bind(new(bench.Fixture, File.ReadAllText(bench.Fixture))).Value;
}
