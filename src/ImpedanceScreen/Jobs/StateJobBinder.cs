using System.Globalization;
using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Jobs;

/// <summary>Binds one output in one drive state to a fixture.</summary>
internal static class StateJobBinder
{
    /// <summary>The state job; null after a mistake that leaves something without a meaning.</summary>
    internal static StateJob? Bind(OutputLimits output, DriveState state, ScreeningFiles files, JobMistakes mistakes)
    {
        FixtureFile fixture = files.Fixture;
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

        if (loadReturn is not null && loadReturn.Meter != way.Meter)
        {
            mistakes.AtState(
                "load_return", $"the rail is read by meter `{loadReturn.Meter}`, the output by `{way.Meter}`",
                "wire both to one meter: its errors then cancel");
            return null;
        }

        if (Range(meter, state, loadReturn, mistakes) is not { } range)
        {
            return null;
        }

        StateJob job = new(way, state, stimulus, loadReturn, loads, meter, range);
        StateChecks.CheckLoading(job, files, mistakes);
        StateChecks.CheckDwell(job, fixture, mistakes);
        StateChecks.CheckRatedLoad(job, mistakes);
        StateChecks.CheckProof(job, mistakes);
        StateChecks.CheckCurrentFlows(job, mistakes);
        if (mistakes.Count == before)
        {
            StateChecks.CheckAcceptance(job, fixture, mistakes);
        }

        return job;
    }

    // A loaded voltage lies between the unloaded one and the return, so these two bound all that is read.
    private static MeterRange? Range(Meter meter, DriveState state, LoadReturn? loadReturn, JobMistakes mistakes)
    {
        double highest = Math.Max(
            state.UnloadedWindowVolt.LargestMagnitude, SafeLoading.ReturnVolt(loadReturn).LargestMagnitude);
        MeterRange? range = meter.Ranges.FirstOrDefault(range => range.FullScaleVolt >= highest);
        if (range is null)
        {
            mistakes.AtState(
                "unloaded_window_v",
                string.Create(CultureInfo.InvariantCulture, $"no range of meter `{meter.Name}` holds {highest:G6} V"),
                "narrow the window, use another return, or use a meter with a higher range");
        }

        return range;
    }

    private static List<Load> Loads(DriveState state, LoadBank bank, JobMistakes mistakes)
    {
        List<Load> loads = [];
        for (int i = 0; i < state.Loads.Count; i++)
        {
            string name = state.Loads[i];
            if (Find(bank.Loads, load => load.Name, name, "load", mistakes.AtState, $"loads[{i}]") is { } load)
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
