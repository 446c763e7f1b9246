using ImpedanceScreen.Files;
using ImpedanceScreen.Limits;
using ImpedanceScreen.SimulatedBench.Logging;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>The boards of the demo population, and the mistakes of a population file.</summary>
public sealed class PopulationTests
{
    private const int Boards = 4000;

    private static readonly BoardFactory Factory = new(Tern6.Population, 6, "T6-000001");
    private static readonly SimulatedBoard[] Lot = [.. Enumerable.Range(1, Boards).Select(i => Factory.Make(i))];

    [Fact]
    public void A_board_depends_on_seed_and_ordinal_alone()
    {
        BoardFactory again = new(Tern6.Population, 6, "T6-000001");
        Assert.Equal(Lot[41].Sources, again.Make(42).Sources);
        Assert.NotEqual(Lot[41].Sources, new BoardFactory(Tern6.Population, 7, "T6-000001").Make(42).Sources);
        Assert.Equal("T6-000042", Lot[41].Label);
    }

    [Fact]
    public void About_the_declared_share_of_boards_is_defective()
    {
        double share = Lot.Count(IsDefective) / (double)Boards;
        double five = 5.0 * Math.Sqrt(Tern6.Population.DefectiveShare * (1.0 - Tern6.Population.DefectiveShare) / Boards);
        Assert.Equal(Tern6.Population.DefectiveShare, share, five);
    }

    [Fact]
    public void Every_kind_of_defect_occurs() =>
        Assert.Equal(
            Enum.GetValues<DefectKind>(),
            Lot.SelectMany(board => board.Sources).Select(source => source.Defect).OfType<DefectKind>().Distinct().Order());

    [Fact]
    public void Healthy_boards_lie_within_the_limits() =>
        Assert.All(
            Lot.Where(board => !IsDefective(board)),
            board => Assert.False(TruthFile.Judge(board, Tern6.Limits).Bad, board.Label));

    [Fact]
    public void A_wrong_resistor_lies_beyond_a_limit_and_every_defect_counts_as_bad() =>
        Assert.All(
            Lot.Where(IsDefective),
            board =>
            {
                Assert.True(TruthFile.Judge(board, Tern6.Limits).Bad);
                TrueSource source = board.Sources.First(each => each.Defect is not null);
                NominalSource truth = new(source.VoltageVolt, source.ResistanceOhm);
                bool isBeyond = Tern6.Limits.Outputs.First(output => output.Name == source.Output)
                    .States.First(state => state.Name == source.State)
                    .Limits.Any(limit => !limit.Holds(limit.Of(truth)));
                bool isShift = source.Defect is not (DefectKind.WeakBuffer or DefectKind.Noisy);
                Assert.Equal(isShift, isBeyond);
            });

    [Fact]
    public void A_weak_buffer_limits_within_the_current_of_its_plan() =>
        Assert.All(
            Lot.SelectMany(board => board.Sources).Where(source => source.Defect == DefectKind.WeakBuffer),
            source =>
            {
                var state = Tern6.Job.States.First(
                    each => each.Output.Name == source.Output && each.State.Name == source.State);
                double heaviest = source.VoltageVolt / (source.ResistanceOhm + state.Loads[^1].ResistanceOhm);
                Assert.InRange(source.CurrentLimitAmpere!.Value, 0.0, 0.95 * heaviest);
            });

    [Theory]
    [InlineData("T6-000001", 23, "T6-000024")]
    [InlineData("9", 0, "9")]
    public void Labels_count_on_in_their_trailing_digits(string first, long places, string label) =>
        Assert.Equal(label, SerialLabel.After(first, places));

    [Theory]
    [InlineData("T6-", 1)]
    [InlineData("T6-9", 1)]
    public void A_label_that_cannot_count_on_is_refused(string first, long places) =>
        Assert.Throws<FormatException>(() => SerialLabel.After(first, places));

    [Theory]
    [InlineData("product: Tern-6", "product: Tern-7", 5, "product")]
    [InlineData("defective_share: 0.22", "defective_share: 1.2", 63, "defective_share")]
    [InlineData("kind: dead, weight: 1.0", "kind: dad, weight: 1.0", 68, "defects[3].kind")]
    [InlineData("outputs: [REF], current_a", "outputs: [RIF], current_a", 72, "defects[7].outputs")]
    [InlineData("outputs: [ALARM], state: high}", "outputs: [ALARM], state: idle}", 69, "defects[4].state")]
    [InlineData("current_a: {min: 0.010, max: 0.030}", "current_a: {min: 0.050, max: 0.030}", 72, "defects[7].current_a.min")]
    [InlineData("  - output: TIDE", "  - output: TIDES", 16, "sources[0].state")]
    [InlineData("capacitance_nf: 1000\n", "capacitance_uf: 1\n", 28, "sources[1].capacitance_uf")]
    [InlineData("  - output: REF", "  - output: TIDE", 14, "sources")]
    public void A_mistake_is_named_with_its_place(string right, string wrong, int line, string key)
    {
        FileText good = Tern6.Read(Tern6.PopulationPath);
        Assert.Contains(right, good.Text, StringComparison.Ordinal);
        int at = good.Text.IndexOf(right, StringComparison.Ordinal);
        FileText bad = new(good.Name, string.Concat(good.Text.AsSpan(0, at), wrong, good.Text.AsSpan(at + right.Length)));
        Checked<Population> read = PopulationFileBinder.Bind(bad, Tern6.Limits);
        Assert.Contains(read.Mistakes, mistake => mistake.Mark.Line == line && mistake.Key == key);
    }

    private static bool IsDefective(SimulatedBoard board) => board.Sources.Any(source => source.Defect is not null);
}
