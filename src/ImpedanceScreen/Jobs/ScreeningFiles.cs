using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Jobs;

/// <summary>The two files that a job is bound from.</summary>
/// <param name="Limits">The limit file.</param>
/// <param name="Fixture">The fixture file.</param>
internal sealed record ScreeningFiles(LimitFile Limits, FixtureFile Fixture);
