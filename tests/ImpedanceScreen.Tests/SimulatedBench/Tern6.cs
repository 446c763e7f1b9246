using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>The demo product's files as they are shipped.</summary>
internal static class Tern6
{
    public static string FixturePath { get; } = Shipped("fixtures", "simulated-bench.yaml");

    public static string LimitsPath { get; } = Shipped("limits", "tern-6.yaml");

    public static string PopulationPath { get; } = Shipped("fixtures", "tern-6-population.yaml");

    public static LimitFile Limits { get; } = LimitFileBinder.Bind(Read(LimitsPath)).Value;

    public static FixtureFile Fixture { get; } = FixtureFileBinder.Bind(Read(FixturePath)).Value;

    public static ScreeningJob Job { get; } = JobOn("simulated-bench.yaml");

    public static Population Population { get; } = PopulationFileBinder.Bind(Read(PopulationPath), Limits).Value;

    public static ScreeningJob JobOn(string fixtureName) =>
        JobBinder.Bind(Limits, FixtureFileBinder.Bind(Read(Shipped("fixtures", fixtureName))).Value).Value;

    public static FileText Read(string path) => new(path, File.ReadAllText(path));

    private static string Shipped(string folder, string name) => Path.Combine(AppContext.BaseDirectory, folder, name);
}
