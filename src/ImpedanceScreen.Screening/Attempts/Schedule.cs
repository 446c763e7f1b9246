using ImpedanceScreen.Estimation;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;

namespace ImpedanceScreen.Screening.Attempts;

/// <summary>Which states are measured beside one another.</summary>
internal static class Schedule
{
    /// <summary>
    /// Waves, one after another. States of one wave share the load return; each of its lanes holds what shares a load
    /// bank or a group, since outputs loaded at once would otherwise shift one another through common return and
    /// supply.
    /// </summary>
    public static IEnumerable<IReadOnlyList<Lane>> Waves(ScreeningJob job) =>
        job.States.GroupBy(state => state.LoadReturn?.Name).Select(wave => Lanes(wave, DiagnosticAlarm.TestsOf(job)));

    private static List<Lane> Lanes(IEnumerable<StateJob> states, int testsPerBoard)
    {
        List<List<StateJob>> lanes = [];
        foreach (StateJob state in states)
        {
            List<List<StateJob>> shared = lanes.FindAll(lane => lane.Exists(other => Share(other.Output, state.Output)));
            List<StateJob> merged = [.. shared.SelectMany(lane => lane), state];
            lanes.RemoveAll(shared.Contains);
            lanes.Add(merged);
        }

        return lanes.ConvertAll(lane => new Lane(lane, testsPerBoard));
    }

    private static bool Share(FixtureOutput one, FixtureOutput other) =>
        one.Name == other.Name || one.LoadBank == other.LoadBank || one.Group == other.Group;
}
