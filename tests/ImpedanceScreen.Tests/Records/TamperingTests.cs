using ImpedanceScreen.Records;
using ImpedanceScreen.Records.Auditing;
using ImpedanceScreen.Tests.Records.Shared;

namespace ImpedanceScreen.Tests.Records;

public sealed class TamperingTests
{
    [Fact]
    public async Task A_hundred_random_tamperings_are_all_found_and_the_first_is_named()
    {
        using TamperedStore store = await TamperedStore.MakeAsync(7);
        Assert.Empty(store.AuditOriginal().Findings);
        var random = new Random(7);
        for (int at = 0; at < 100; at++)
        {
            (Tampering done, AuditReport report) = store.Try(random);
            Assert.True(
                TamperedStore.Found(done, report),
                $"case {at}, {done.What}: {string.Join(" | ", report.Findings.Take(3))}");
        }
    }

    [Fact]
    public void A_file_of_garbage_gives_findings_and_no_exception()
    {
        string path = Path.GetTempFileName();
        try
        {
            var bytes = new byte[20_000];
            new Random(1).NextBytes(bytes);
            File.WriteAllBytes(path, bytes);
            Assert.False(Audit.Run(path).IsClean);
        }
        finally
        {
            File.Delete(path);
        }
    }
}
