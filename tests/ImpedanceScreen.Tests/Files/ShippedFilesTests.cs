using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Tests.Files;

public sealed class ShippedFilesTests
{
    [Theory]
    [InlineData(ShippedFiles.SimulatedBench)]
    [InlineData(ShippedFiles.TwoSerialPorts)]
    public void The_demo_product_fits_each_fixture(string fixtureName)
    {
        Checked<LimitFile> limits = LimitFileBinder.Bind(ShippedFiles.Read(ShippedFiles.Limits));
        Assert.Empty(limits.Mistakes);
        Checked<FixtureFile> fixture = FixtureFileBinder.Bind(ShippedFiles.Read(fixtureName));
        Assert.Empty(fixture.Mistakes);
        Checked<ScreeningJob> job = JobBinder.Bind(limits.Value, fixture.Value);
        Assert.Empty(job.Mistakes);
        Assert.Equal(6, job.Value.States.Count);
    }
}
