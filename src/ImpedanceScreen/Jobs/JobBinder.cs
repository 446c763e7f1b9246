using System.Globalization;
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
        ScreeningFiles files = new(limits, fixture);
        List<Mistake> mistakes = [];
        List<StateJob> states = [];
        JobMistakes whole = new(files, "", "", mistakes);
        CheckCeiling(files, whole);
        for (int i = 0; i < limits.Outputs.Count; i++)
        {
            for (int j = 0; j < limits.Outputs[i].States.Count; j++)
            {
                JobMistakes place = new(files, $"outputs[{i}]", $"outputs[{i}].states[{j}]", mistakes);
                if (StateJobBinder.Bind(limits.Outputs[i], limits.Outputs[i].States[j], files, place) is { } state)
                {
                    states.Add(state);
                }
            }
        }

        return mistakes.Count == 0
            ? Checked<ScreeningJob>.Good(new(limits, fixture, states))
            : Checked<ScreeningJob>.Bad(whole.InOrder());
    }

    // What the fixture brings to the board counts as on the board.
    private static void CheckCeiling(ScreeningFiles files, JobMistakes mistakes)
    {
        double ceiling = files.Limits.VoltageCeilingVolt;
        string problem = string.Create(
            CultureInfo.InvariantCulture, $"above the product's voltage ceiling of {ceiling:G6} V");
        const string cure = "correct the voltage, or the ceiling in the limit file";
        if (Math.Abs(files.Fixture.BoardSupply?.VoltageVolt ?? 0.0) > ceiling)
        {
            mistakes.AtFixture("board_supply.voltage_v", problem, cure);
        }

        IEnumerable<DriveState> states = files.Limits.Outputs.SelectMany(output => output.States);
        HashSet<string> used = [.. states.Select(state => state.LoadReturn).OfType<string>()];
        for (int i = 0; i < files.Fixture.LoadReturns.Count; i++)
        {
            LoadReturn rail = files.Fixture.LoadReturns[i];
            if (used.Contains(rail.Name) && Math.Abs(rail.VoltageVolt.Value) > ceiling)
            {
                mistakes.AtFixture($"load_returns[{i}].voltage_v", problem, cure);
            }
        }
    }
}
