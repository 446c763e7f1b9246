using CsCheck;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Tests.Files;

public sealed class SafeLoadingTests
{
    // Bound from the small files: 12 V supply and ceiling, L1k at 1000.2 - 0.2 ohm, rail of 5 V within 3 x 10 mV.
    private static readonly ScreeningJob Job = JobBinder.Bind(
        LimitFileBinder.Bind(SmallFiles.Limits()).Value, FixtureFileBinder.Bind(SmallFiles.Fixture()).Value).Value;

    private static readonly StateJob Idle = Job.States[0];
    private static readonly StateJob Low = Job.States[1];
    private static readonly Load L1k = Idle.Loads[^1];

    [Fact]
    public void The_worst_load_power_is_that_of_the_supply_across_the_load()
    {
        Window present = SafeLoading.PresentVolt(Idle.State, null, Job.Fixture.BoardSupply, 12.0);
        Assert.Equal(new Window(0.0, 12.0), present);
        Assert.Equal(0.144, SafeLoading.LoadPowerWatt(L1k, present, null), 12);
    }

    [Fact]
    public void A_rail_counts_from_its_farthest_end()
    {
        Window present = SafeLoading.PresentVolt(Low.State, Low.LoadReturn, Job.Fixture.BoardSupply, 12.0);
        Assert.Equal(new Window(-0.1, 12.0), present);
        Assert.Equal(7.03 * 7.03 / 1000.0, SafeLoading.LoadPowerWatt(L1k, present, Low.LoadReturn), 12);
        Assert.Equal(5.13e-3, SafeLoading.OutputCurrentAmpere(Low.State, Low.LoadReturn, L1k), 12);
        Assert.Equal(2.515 * 2.515 / 1000.0, SafeLoading.OutputPowerWatt(Low.State, Low.LoadReturn, L1k), 12);
    }

    [Fact]
    public void The_supply_never_counts_beyond_the_ceiling_and_a_negative_one_counts_as_such() =>
        Assert.Equal(
            new Window(-10.0, 5.5),
            SafeLoading.PresentVolt(Idle.State, null, Job.Fixture.BoardSupply! with { VoltageVolt = -15.0 }, 10.0));

    [Fact]
    public void The_output_is_judged_at_the_edge_of_its_window()
    {
        Assert.Equal(5.5e-3, SafeLoading.OutputCurrentAmpere(Idle.State, null, L1k), 12);
        Assert.Equal(5.5 * 5.5 / 1000.0, SafeLoading.OutputPowerWatt(Idle.State, null, L1k), 12);
    }

    [Fact]
    public void A_bound_job_permits_its_loads_and_refuses_a_weaker_one_before_switching()
    {
        foreach (StateJob state in Job.States)
        {
            Assert.All(state.Loads, load => Assert.Null(SafeLoading.Refusal(Job, state, load)));
        }

        string? refusal = SafeLoading.Refusal(Job, Idle, L1k with { PowerRatingWatt = 0.1 });
        Assert.Equal("load `L1k` may take 0.144, more than the 0.1 W it is rated for", refusal);
        Assert.NotNull(SafeLoading.Refusal(Job, Idle, L1k with { ResistanceOhm = 500.0 }));
    }

    /// <summary>No source within the window, whatever its resistance, exceeds what was computed for it.</summary>
    [Fact]
    public void No_real_source_exceeds_the_worst_case() =>
        Gen.Select(
                Gen.Double[-20.0, 20.0], Gen.Double[0.0, 10.0], Gen.Double[0.0, 1.0], Gen.Double[0.0, 5000.0],
                Gen.Double[-15.0, 15.0])
            .Sample((low, width, part, sourceOhm, railVolt) =>
            {
                DriveState state = Idle.State with { UnloadedWindowVolt = new(low, low + width) };
                LoadReturn rail = Low.LoadReturn! with { VoltageVolt = new(railVolt, 0.0) };
                double source = low + (part * width);
                double current = (source - railVolt) / (sourceOhm + L1k.ResistanceOhm);
                double terminal = source - (current * sourceOhm);
                Window present = SafeLoading.PresentVolt(state, rail, null, 60.0);
                return Math.Abs(current) <= SafeLoading.OutputCurrentAmpere(state, rail, L1k)
                    && Math.Abs(terminal * current) <= SafeLoading.OutputPowerWatt(state, rail, L1k)
                    && current * current * L1k.ResistanceOhm <= SafeLoading.LoadPowerWatt(L1k, present, rail);
            }, iter: 20_000);

    [Fact]
    public void The_change_that_proves_load_current_follows_the_voltage_divider()
    {
        // 5 V, 100.1 ohm (lead included in two-wire sensing) into 1000.2 + 0.2 ohm.
        Assert.Equal(5.0 * 100.1 / 1100.5, LoadProof.NominalChangeVolt(Idle, L1k), 12);
        StateJob terminal = Idle with { Output = Idle.Output with { Sensing = Sensing.Terminal } };
        Assert.Equal(5.0 * 100.0 / 1100.5, LoadProof.NominalChangeVolt(terminal, L1k), 12);

        // 15 uV over four readings, 1 uV of resolution, both at two points.
        double expected = Math.Sqrt(2.0 * ((15e-6 * 15e-6 / 4.0) + (1e-6 * 1e-6 / 12.0)));
        Assert.Equal(expected, LoadProof.ChangeUncertaintyVolt(Idle.Range, 4), 15);
    }
}
