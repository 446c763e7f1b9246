using ImpedanceScreen.Benchmarks.Durability;

namespace ImpedanceScreen.Benchmarks;

/// <summary>System calls of the station: the store's log is synced before every write of a sort coil.</summary>
internal sealed class DurabilityCommand : IFigureCommand
{
    private const int SortWritesPerBoard = 2;

    public string Name => "durability";

    public string Description => "Traces system calls of a lot: the store's log is synced before every sort write.";

    public int DefaultCount => 24;

    public async Task<int> RunAsync(int count, ulong seed, CancellationToken cancellation)
    {
        SortingReport report = await TracedLot.RunAsync(count, seed);
        foreach (string violation in report.Violations)
        {
            Console.WriteLine(violation);
        }

        Console.WriteLine(
            $"{count} boards: {report.SortWrites} sort writes, {report.Syncs} syncs of the log, "
            + $"{report.Violations.Count} violations");
        return report.Violations.Count == 0 && report.SortWrites == count * SortWritesPerBoard ? 0 : 1;
    }
}
