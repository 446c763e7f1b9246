using ImpedanceScreen.Benchmarks.Kills;

namespace ImpedanceScreen.Tests.Station;

[Collection(RealTime.Name)]
public sealed class KillTests
{
    [Fact]
    public async Task A_station_that_is_killed_loses_no_record_and_leaves_no_relay_closed_after_its_restart()
    {
        KillReport report = await KillCampaign.RunAsync(5, seed: 11, CancellationToken.None);

        Assert.Empty(report.Violations);
        Assert.Equal(5, report.Kills);
        Assert.InRange(report.Sorted, 8, int.MaxValue);
    }
}
