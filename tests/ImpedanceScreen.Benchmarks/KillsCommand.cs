using ImpedanceScreen.Benchmarks.Kills;

namespace ImpedanceScreen.Benchmarks;

/// <summary>The station killed with SIGKILL at random instants of a lot, and started again each time.</summary>
internal sealed class KillsCommand : IFigureCommand
{
    public string Name => "kills";

    public string Description => "A lot whose station is killed at random instants; bench log and store are judged.";

    public int DefaultCount => 50;

    public async Task<int> RunAsync(int count, ulong seed, CancellationToken cancellation)
    {
        KillReport report = await KillCampaign.RunAsync(count, seed, cancellation);
        foreach (string violation in report.Violations)
        {
            Console.WriteLine(violation);
        }

        Console.WriteLine(
            $"{report.Kills} kills ({report.AtHandshake} right after a handshake step), {report.Sorted} boards sorted, "
            + $"{report.Attempts} attempts, {report.Records} records, {report.Holds} holds for a person, "
            + $"{report.Violations.Count} violations");
        return report.Violations.Count == 0 && report.Kills == count ? 0 : 1;
    }
}
