using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Station.Hosting;

/// <summary>Reads limit and fixture files and binds them to one another.</summary>
internal static class JobFiles
{
    /// <exception cref="NotBegunException">There are mistakes; the message lists all of them, one a line.</exception>
    public static ScreeningJob Load(string limitsPath, string fixturePath)
    {
        Checked<LimitFile> limits = LimitFileBinder.Bind(TextFiles.Read(limitsPath));
        Checked<FixtureFile> fixture = FixtureFileBinder.Bind(TextFiles.Read(fixturePath));
        if (limits.TryGet(out LimitFile? boundLimits) && fixture.TryGet(out FixtureFile? boundFixture))
        {
            Checked<ScreeningJob> job = JobBinder.Bind(boundLimits, boundFixture);
            return job.TryGet(out ScreeningJob? bound) ? bound : throw Refused(job.Mistakes);
        }

        throw Refused([.. limits.Mistakes, .. fixture.Mistakes]);
    }

    /// <exception cref="NotBegunException">There are mistakes.</exception>
    public static FixtureFile LoadFixture(string path)
    {
        Checked<FixtureFile> fixture = FixtureFileBinder.Bind(TextFiles.Read(path));
        return fixture.TryGet(out FixtureFile? bound) ? bound : throw Refused(fixture.Mistakes);
    }

    private static NotBegunException Refused(IReadOnlyList<Mistake> mistakes) =>
        new(string.Join(Environment.NewLine, mistakes));
}
