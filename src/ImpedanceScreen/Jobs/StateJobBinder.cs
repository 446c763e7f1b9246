using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Jobs;

/// <summary>Binds one output in one drive state to a fixture.</summary>
internal static class StateJobBinder
{
    /// <summary>The state job; null after a mistake that leaves something without a meaning.</summary>
    internal static StateJob? Bind(OutputLimits output, DriveState state, FixtureFile fixture, JobMistakes mistakes)
    {
        int before = mistakes.Count;
        FixtureOutput? way = Find(
            fixture.Outputs, item => item.Name, output.Name, "output", mistakes.AtOutput, "name");
        Stimulus? stimulus = state.Stimulus is null ? null : Find(
            fixture.Stimuli, item => item.Name, state.Stimulus, "stimulus", mistakes.AtState, "stimulus");
        LoadReturn? loadReturn = state.LoadReturn is null ? null : Find(
            fixture.LoadReturns, item => item.Name, state.LoadReturn, "load return", mistakes.AtState, "load_return");
        if (way is null)
        {
            return null;
        }

        List<Load> loads = Loads(state, fixture.LoadBanks.Single(bank => bank.Name == way.LoadBank), mistakes);
        Meter meter = fixture.Meters.Single(item => item.Name == way.Meter);
        if (mistakes.Count != before)
        {
            return null;
        }

        double highest = Math.Max(
            state.UnloadedWindowVolt.LargestMagnitude, Math.Abs(loadReturn?.VoltageVolt.Value ?? 0.0));
        if (meter.Ranges.FirstOrDefault(range => range.FullScaleVolt >= highest) is not { } range)
        {
            mistakes.AtState(
                "unloaded_window_v", $"no range of meter `{meter.Name}` holds {highest:G6} V",
                "narrow the window, or use a meter with a higher range");
            return null;
        }

        return new(way, state, stimulus, loadReturn, loads, meter, range);
    }

    private static List<Load> Loads(DriveState state, LoadBank bank, JobMistakes mistakes)
    {
        List<Load> loads = [];
        for (int i = 0; i < state.Loads.Count; i++)
        {
            if (Find(bank.Loads, load => load.Name, state.Loads[i], "load", mistakes.AtState, $"loads[{i}]") is { } load)
            {
                loads.Add(load);
            }
        }

        return [.. loads.OrderByDescending(load => load.ResistanceOhm)];
    }

    private static T? Find<T>(
        IReadOnlyList<T> items, Func<T, string> nameOf, string name, string what,
        Action<string, string, string> report, string key)
        where T : class
    {
        if (items.FirstOrDefault(item => nameOf(item) == name) is { } found)
        {
            return found;
        }

        report(key, $"the fixture has no {what} `{name}`", NameTable.Cure(name, items.Select(nameOf)));
        return null;
    }
}
