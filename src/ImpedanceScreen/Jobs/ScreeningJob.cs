using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Jobs;

/// <summary>
/// A product's limits bound to a fixture and found to fit it: everything the way of a board needs to know.
/// </summary>
/// <param name="Limits">The limit file.</param>
/// <param name="Fixture">The fixture file.</param>
/// <param name="States">Every output in every drive state, in the order in which they are screened.</param>
public sealed record ScreeningJob(LimitFile Limits, FixtureFile Fixture, IReadOnlyList<StateJob> States);

/// <summary>One output in one drive state on one fixture.</summary>
/// <param name="Output">How the output reaches loads and meter.</param>
/// <param name="State">How it is driven, loaded and judged.</param>
/// <param name="Stimulus">The stimulus that makes the state; null where none is needed.</param>
/// <param name="LoadReturn">The rail that loads return to; null for common.</param>
/// <param name="Loads">The loads of its plan in the order of ascending load current (descending resistance).</param>
/// <param name="Meter">The meter that reads it.</param>
/// <param name="Range">The one range used in this state: the smallest that holds every voltage expected.</param>
public sealed record StateJob(
    FixtureOutput Output,
    DriveState State,
    Stimulus? Stimulus,
    LoadReturn? LoadReturn,
    IReadOnlyList<Load> Loads,
    Meter Meter,
    MeterRange Range);
