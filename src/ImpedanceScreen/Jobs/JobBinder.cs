using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Jobs;

/// <summary>Binds a product's limits to a fixture.</summary>
public static class JobBinder
{
    /// <summary>Binds: the job, or every mistake that shows only when the two files meet.</summary>
    public static Checked<ScreeningJob> Bind(LimitFile limits, FixtureFile fixture)
    {
        ArgumentNullException.ThrowIfNull(limits);
        ArgumentNullException.ThrowIfNull(fixture);
        List<Mistake> mistakes = [];
        List<StateJob> states = [];
        for (int i = 0; i < limits.Outputs.Count; i++)
        {
            for (int j = 0; j < limits.Outputs[i].States.Count; j++)
            {
                JobMistakes place = new(limits, fixture, $"outputs[{i}]", $"outputs[{i}].states[{j}]", mistakes);
                if (StateJobBinder.Bind(limits.Outputs[i], limits.Outputs[i].States[j], fixture, place) is { } state)
                {
                    states.Add(state);
                }
            }
        }

        return mistakes.Count == 0
            ? Checked<ScreeningJob>.Good(new(limits, fixture, states))
            : Checked<ScreeningJob>.Bad(mistakes);
    }
}
