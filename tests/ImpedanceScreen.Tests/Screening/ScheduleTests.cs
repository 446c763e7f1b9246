using CsCheck;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Quantities;
using ImpedanceScreen.Screening.Attempts;

namespace ImpedanceScreen.Tests.Screening;

public sealed class ScheduleTests
{
    private static readonly ScreeningJob Job = SmallJob.Make();
    private static readonly StateJob Template = Job.States[2];

    [Fact]
    public void What_shares_a_load_bank_is_measured_one_after_another_in_the_order_of_the_limit_file() =>
        Assert.Equal([[["ALARM high", "ALARM low", "TIDE idle"]]], Waves(Job));

    [Fact]
    public void What_has_a_load_bank_and_a_group_of_its_own_is_measured_side_by_side() =>
        Assert.Equal([[["ALARM high", "ALARM low"], ["TIDE idle"]]], Waves(SmallJob.Make(ownBanks: true)));

    [Fact]
    public void Neither_load_banks_alone_nor_groups_alone_let_outputs_be_loaded_at_once()
    {
        Assert.Equal([[["A idle", "B idle"]]], Waves(State("A", "bank-1", "group-1"), State("B", "bank-1", "group-2")));
        Assert.Equal([[["A idle", "B idle"]]], Waves(State("A", "bank-1", "group-1"), State("B", "bank-2", "group-1")));
    }

    [Fact]
    public void An_output_that_shares_with_two_others_joins_them() =>
        Assert.Equal(
            [[["D idle"], ["A idle", "B idle", "C idle"]]],
            Waves(
                State("A", "bank-1", "group-1"), State("B", "bank-2", "group-2"), State("D", "bank-4", "group-4"),
                State("C", "bank-1", "group-2")));

    [Fact]
    public void Loads_that_return_to_a_rail_wait_until_those_that_return_to_common_are_done() =>
        Assert.Equal(
            [[["A idle"], ["C idle"]], [["B idle"], ["D idle"]]],
            Waves(
                State("A", "bank-1", "group-1"), State("B", "bank-2", "group-2", "rail"),
                State("C", "bank-3", "group-3"), State("D", "bank-4", "group-4", "rail")));

    [Fact]
    public void Whatever_the_fixture_each_state_has_its_turn_once_and_lanes_side_by_side_share_nothing()
    {
        Gen<StateJob> state = Gen.Select(Gen.Int[0, 4], Gen.Int[0, 3], Gen.Int[0, 3], Gen.Int[-1, 1]).Select(
            (output, bank, group, rail) => State(
                $"{output}", $"{bank}", $"{group}", rail < 0 ? null : $"{rail}"));
        state.Array[1, 12].Sample(
            states =>
            {
                List<List<List<StateJob>>> waves = [.. Schedule.Waves(Of(states)).Select(wave => wave.Select(Drain).ToList())];
                Assert.Equal(states.Length, waves.Sum(wave => wave.Sum(lane => lane.Count)));
                Assert.All(waves, AssertMayBeLoadedAtOnce);
            },
            iter: 2_000,
            threads: 1);
    }

    private static void AssertMayBeLoadedAtOnce(List<List<StateJob>> wave)
    {
        Assert.Single(wave.SelectMany(lane => lane).Select(state => state.LoadReturn?.Name).Distinct());
        foreach (Func<FixtureOutput, string> shared in (Func<FixtureOutput, string>[])
            [output => output.Name, output => output.LoadBank, output => output.Group])
        {
            string[] used = [.. wave.SelectMany(lane => lane.Select(state => shared(state.Output)).Distinct())];
            Assert.Equal(used.Distinct(), used);
        }
    }

    private static List<List<List<string>>> Waves(params StateJob[] states) => Waves(Of(states));

    private static List<List<List<string>>> Waves(ScreeningJob job) =>
    [
        .. Schedule.Waves(job).Select(wave => wave.Select(lane => Drain(lane)
            .ConvertAll(state => $"{state.Output.Name} {state.State.Name}")).ToList()),
    ];

    private static List<StateJob> Drain(Lane lane)
    {
        List<StateJob> states = [];
        while (lane.TakeNextState())
        {
            states.Add(lane.State!);
        }

        return states;
    }

    private static ScreeningJob Of(IReadOnlyList<StateJob> states) => Job with { States = states };

    private static StateJob State(string output, string bank, string group, string? rail = null) => Template with
    {
        Output = Template.Output with { Name = output, LoadBank = bank, Group = group },
        LoadReturn = rail is null
            ? null
            : new LoadReturn(rail, new Relay("a", 50, null), new Relay("a", 51, null), "meter", new Uncertain(5, 0.01), 0.1),
    };
}
