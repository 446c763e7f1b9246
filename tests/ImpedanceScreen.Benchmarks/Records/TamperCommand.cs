using System.Globalization;
using ImpedanceScreen.Records.Auditing;
using ImpedanceScreen.Tests.Records.Shared;

namespace ImpedanceScreen.Benchmarks.Records;

/// <summary>
/// Stores that somebody tampered with: the audit must find all, and name the first thing that is wrong.
/// </summary>
internal sealed class TamperCommand : IFigureCommand
{
    public string Name => "tamper";

    public string Description =>
        "Random tamperings with a store (bytes, rows, columns, order, tail): audit finds each and names it.";

    public int DefaultCount => 1000;

    public async Task<int> RunAsync(int count, ulong seed, CancellationToken cancellation)
    {
        int start = (int)(seed % int.MaxValue);
        var random = new Random(start);
        using TamperedStore store = await TamperedStore.MakeAsync(start);
        bool clean = store.AuditOriginal().IsClean;
        int found = 0;
        for (int at = 0; at < count; at++)
        {
            cancellation.ThrowIfCancellationRequested();
            (Tampering done, AuditReport report) = store.Try(random);
            if (TamperedStore.Found(done, report))
            {
                found++;
            }
            else
            {
                Console.WriteLine($"case {at}, {done.What}: {string.Join(" | ", report.Findings.Take(2))}");
            }
        }

        Console.WriteLine(string.Create(
            CultureInfo.InvariantCulture,
            $"tamperings {count}, seed {seed}: {found} found and named; the store itself {(clean ? "clean" : "not clean")}"));
        return clean && found == count ? 0 : 1;
    }
}
