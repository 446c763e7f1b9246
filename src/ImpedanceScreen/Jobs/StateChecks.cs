using System.Globalization;
using ImpedanceScreen.Decisions;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Jobs;

/// <summary>Checks of one output in one drive state against the fixture it is screened on.</summary>
internal static class StateChecks
{
    // A droop at the rated load is read off the fitted line; a little beyond the heaviest load is still on it.
    private const double RatedLoadReach = 1.1;

    /// <summary>Every load of the plan, worst case against its rating and what the output is allowed.</summary>
    internal static void CheckLoading(StateJob job, ScreeningFiles files, JobMistakes mistakes)
    {
        Window present = SafeLoading.PresentVolt(
            job.State, job.LoadReturn, files.Fixture.BoardSupply, files.Limits.VoltageCeilingVolt);
        foreach (Load load in job.Loads)
        {
            if (SafeLoading.Refusal(job.State, job.LoadReturn, load, present) is { } reason)
            {
                mistakes.AtState(
                    $"loads[{IndexOf(job.State.Loads, load.Name)}]", reason,
                    "take a load of higher resistance or rating, or correct `allowed` or the unloaded window");
            }
        }
    }

    /// <summary>The plan's time under load against the allowed dwell; exchanges come on top of it.</summary>
    internal static void CheckDwell(StateJob job, FixtureFile fixture, JobMistakes mistakes)
    {
        // While other outputs are loaded beside it, a load stays closed until the meter has read them too.
        TimeSpan reading = job.Meter.Integration * job.State.ReadingsPerLoadPoint * fixture.OutputsLoadedAtOnce;
        TimeSpan total = TimeSpan.Zero;
        foreach (Load load in job.Loads)
        {
            RelayUnit unit = fixture.RelayUnits.First(item => item.Name == load.Relay.Unit);
            total += unit.Operate + job.State.Settle + reading;
        }

        if (total > job.State.Allowed.Dwell)
        {
            mistakes.AtState(
                "allowed.dwell_s",
                Invariant($"the plan keeps the output under load for {total.TotalSeconds:G3} s"),
                "use fewer loads or readings, or shorter settling, or allow a longer dwell");
        }
    }

    /// <summary>Droop limits need a rated load that the plan's currents reach.</summary>
    internal static void CheckRatedLoad(StateJob job, JobMistakes mistakes)
    {
        Load heaviest = job.Loads[^1];
        foreach (QuantityLimit limit in job.State.Limits)
        {
            if (limit.RatedLoadOhm * RatedLoadReach < heaviest.ResistanceOhm)
            {
                mistakes.AtState(
                    "limits.droop_percent.rated_load_ohm",
                    Invariant($"heavier than any load of the plan (`{heaviest.Name}`: {heaviest.ResistanceOhm:G6} ohm)"),
                    "add a load near the rated load: nothing is extrapolated");
            }
        }
    }

    /// <summary>
    /// Only a change of the voltage proves that load current flowed; a contact alone suffices where no limit would be
    /// satisfied without any.
    /// </summary>
    internal static void CheckProof(StateJob job, JobMistakes mistakes)
    {
        Load heaviest = job.Loads[^1];
        double change = LoadProof.NominalChangeVolt(job, heaviest);
        double uncertainty = LoadProof.ChangeUncertaintyVolt(job.Range, job.State.ReadingsPerLoadPoint);
        QuantityLimit? satisfied = job.State.Limits.FirstOrDefault(LoadProof.IsSatisfiedByZeroChange);
        bool contact = job.Output.LoadCurrentProof == LoadCurrentProof.ContactReadback;
        if (change >= LoadProof.ProvingFactor * uncertainty || (contact && satisfied is null) || !CurrentFlows(job))
        {
            return;
        }

        string seen = Invariant(
            $"the heaviest load changes a good output by {change * 1e6:G3} uV, known to {uncertainty * 1e6:G3} uV");
        string cure = contact
            ? "take a heavier load or more readings: a contact shows that its relay moved, not that current flowed"
            : "wire contact readback on the loads, take a heavier load or more readings";
        if (satisfied is null)
        {
            mistakes.AtState("loads", $"{seen}: no load point would count", cure);
        }
        else
        {
            mistakes.AtState(
                "limits." + QuantityLimitReader.KeyOf(satisfied.Quantity),
                $"a load that never came on would satisfy it; {seen}", cure);
        }
    }

    /// <summary>A load that returns to the output's own voltage draws no current.</summary>
    internal static void CheckCurrentFlows(StateJob job, JobMistakes mistakes)
    {
        if (!CurrentFlows(job))
        {
            mistakes.AtState(
                job.State.LoadReturn is null ? "nominal.source_voltage_v" : "load_return",
                "no load current flows: the load returns to the output's own voltage",
                "return the loads of this state to a rail of another voltage");
        }
    }

    /// <summary>Guard bands of the planned uncertainty must leave something that can pass.</summary>
    internal static void CheckAcceptance(StateJob job, FixtureFile fixture, JobMistakes mistakes)
    {
        Uncertain? temperature = fixture.TemperatureSensor is { } sensor
            ? new Uncertain(job.Loads[0].CalibrationTemperatureDegC, sensor.StandardUncertaintyDegC)
            : null;
        IReadOnlyList<double> planned = PlannedUncertainty.Of(job, temperature);
        for (int i = 0; i < planned.Count; i++)
        {
            QuantityLimit limit = job.State.Limits[i];
            if (AcceptanceZone.IsEmpty(limit, planned[i]))
            {
                mistakes.AtState(
                    "limits." + QuantityLimitReader.KeyOf(limit.Quantity),
                    double.IsInfinity(planned[i])
                        ? "the plan cannot determine it, so that nothing could pass"
                        : Invariant(
                            $"guard bands of {limit.Rule.GuardFactor:G3} x {planned[i]:G3} leave nothing that could pass"),
                    "widen the limits, lower `guard_factor`, or plan more readings or a heavier load");
            }
        }
    }

    private static bool CurrentFlows(StateJob job) =>
        !SafeLoading.ReturnVolt(job.LoadReturn).Contains(job.State.Nominal.SourceVoltageVolt);

    private static int IndexOf(IReadOnlyList<string> names, string name) =>
        Enumerable.Range(0, names.Count).First(i => names[i] == name);

    private static string Invariant(FormattableString text) => text.ToString(CultureInfo.InvariantCulture);
}
