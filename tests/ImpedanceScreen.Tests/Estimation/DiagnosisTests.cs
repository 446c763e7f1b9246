using ImpedanceScreen.Bench;
using ImpedanceScreen.Decisions;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Reference;

namespace ImpedanceScreen.Tests.Estimation;

public sealed class DiagnosisTests
{
    private readonly SourceBench bench = new(11);

    [Fact]
    public void A_dead_output_is_no_source()
    {
        StateResult result = Evaluate(SourceBench.Job(), bench.Read(SourceBench.Job(), 0.001, 100));
        AssertFault(result, SourceFaultKind.NoSource, Decision.Fail, "no source");
    }

    [Fact]
    public void A_reversed_output_is_named_by_its_polarity()
    {
        StateResult result = Evaluate(SourceBench.Job(), bench.Read(SourceBench.Job(), -5, 100));
        AssertFault(result, SourceFaultKind.UnloadedOutsideWindow, Decision.Fail, "wrong polarity");
    }

    [Fact]
    public void A_weak_output_is_current_limited_with_its_knee()
    {
        StateJob job = SourceBench.Job();
        IReadOnlyList<LoadPointReadings> readings = bench.Read(
            job, ampere => 5 - (100 * ampere) - (2000 * Math.Max(0, ampere - 7e-3)));
        StateResult result = Evaluate(job, readings);
        AssertFault(result, SourceFaultKind.CurrentLimited, Decision.Fail, "below it at load L470");
        Assert.DoesNotContain(readings, read => read.Point.Load?.Name == "L220");
    }

    [Fact]
    public void A_resistance_that_falls_with_current_is_curved()
    {
        StateJob job = SourceBench.Job();
        StateResult result = Evaluate(
            job, bench.Read(job, ampere => 5 - (100 * ampere) + (800 * ampere * ampere)));
        AssertFault(result, SourceFaultKind.Curved, Decision.Fail, "curved");
    }

    [Fact]
    public void A_scattering_output_is_unstable()
    {
        StateJob job = SourceBench.Job();
        IReadOnlyList<LoadPointReadings> readings = Disturb(
            bench.Read(job, 5, 100), _ => true, (volt, i) => volt + (1e-4 * (i % 2)));
        AssertFault(Evaluate(job, readings), SourceFaultKind.Unstable, Decision.Fail, "unstable");
    }

    [Fact]
    public void An_output_that_stays_low_after_the_loads_did_not_come_back()
    {
        StateJob job = SourceBench.Job();
        IReadOnlyList<LoadPointReadings> readings = bench.Read(job, 5, 100);
        IReadOnlyList<LoadPointReadings> latched =
            [.. readings.SkipLast(1), Disturb([readings[^1]], _ => true, (volt, _) => volt - 0.01)[0]];
        AssertFault(Evaluate(job, latched), SourceFaultKind.NotRecovered, Decision.Fail, "did not come back");
    }

    [Fact]
    public void A_load_that_never_came_on_points_at_its_relay()
    {
        StateJob job = SourceBench.Job();
        Draw draw = Draw.From(job, new Random(2));
        draw.PathOhm[1] = double.PositiveInfinity;
        IReadOnlyList<LoadPointReadings> readings = bench.Read(job, ampere => 5 - (100 * ampere), draw);
        StateResult result = Evaluate(job, readings);
        AssertFault(result, SourceFaultKind.LoadNotProved, Decision.Undecided,
            "load relay L1000 did not close or joint open");
    }

    [Fact]
    public void No_load_at_all_points_at_the_selector()
    {
        StateJob job = SourceBench.Job();
        Draw draw = Draw.From(job, new Random(2));
        Array.Fill(draw.PathOhm, double.PositiveInfinity);
        StateResult result = Evaluate(job, bench.Read(job, ampere => 5 - (100 * ampere), draw));
        AssertFault(result, SourceFaultKind.LoadNotProved, Decision.Undecided, "selector relay");
    }

    [Fact]
    public void A_joint_that_is_open_behind_a_closed_contact_points_at_the_load()
    {
        StateJob job = SourceBench.Job(contact: true);
        Draw draw = Draw.From(job, new Random(2));
        draw.PathOhm[1] = double.PositiveInfinity;
        StateResult result = Evaluate(job, bench.Read(job, ampere => 5 - (100 * ampere), draw));
        AssertFault(result, SourceFaultKind.LoadNotProved, Decision.Undecided, "load L1000 changes nothing");
    }

    [Fact]
    public void No_change_at_all_behind_closed_contacts_is_no_perfect_source()
    {
        StateJob job = SourceBench.Job(contact: true);
        Draw draw = Draw.From(job, new Random(2));
        Array.Fill(draw.PathOhm, double.PositiveInfinity);
        StateResult result = Evaluate(job, bench.Read(job, ampere => 5 - (100 * ampere), draw));
        AssertFault(result, SourceFaultKind.LoadNotProved, Decision.Undecided, "though their contacts read closed");
    }

    [Theory]
    [InlineData(0.0)]
    [InlineData(5.5)]
    public void A_rail_that_is_not_as_stated_closes_no_load_and_points_at_the_rail(double railVolt)
    {
        StateJob job = SourceBench.Job(vth: 0.1, rth: 50, rail: 5, contact: true);
        Draw draw = Draw.From(job, new Random(2)) with { ReturnVolt = railVolt };
        IReadOnlyList<LoadPointReadings> readings = bench.Read(job, ampere => 0.1 - (50 * ampere), draw);
        Assert.Equal(Sensed.LoadReturn, Assert.Single(readings).Point.Sensed);
        AssertFault(Evaluate(job, readings), SourceFaultKind.LoadNotProved, Decision.Undecided, "is stated");
    }

    [Fact]
    public void A_contact_that_reads_open_points_at_the_relay()
    {
        StateJob job = SourceBench.Job(contact: true);
        IReadOnlyList<LoadPointReadings> readings =
            [.. bench.Read(job, 5, 100).Select((read, i) => i == 3 ? read with { ContactProved = false } : read)];
        StateResult result = Evaluate(job, readings);
        AssertFault(result, SourceFaultKind.LoadNotProved, Decision.Undecided, "its contact reads open");
    }

    [Fact]
    public void Overload_and_no_number_are_told_apart()
    {
        StateJob job = SourceBench.Job();
        MeterReading over = new("9.9E37", ReadingCondition.Overload, double.NaN, SourceBench.Start);
        MeterReading none = new("9.91E37", ReadingCondition.NotANumber, double.NaN, SourceBench.Start);
        AssertFault(
            Evaluate(job, [new(new LoadPoint(null), null, [over])]), SourceFaultKind.Overload, Decision.Fail,
                "overload");
        AssertFault(
            Evaluate(job, [new(new LoadPoint(null), null, [none])]), SourceFaultKind.NoNumber, Decision.Undecided,
                "no number");
    }

    [Fact]
    public void Alarms_on_good_boards_keep_to_their_stated_rate()
    {
        // 0.1 % for each of the four tests; their sum is an upper bound for a board.
        const int Boards = 3000;
        const double Rate = 4 * DiagnosticAlarm.BoardRate;
        StateJob job = SourceBench.Job();
        int alarms = Enumerable.Range(0, Boards).Count(_ => StateEvaluation.Evaluate(
            job, bench.Read(job, 5, 100), new(Draw.TemperatureDegC, Draw.TemperatureUncertaintyDegC), 1,
            SourceBench.Start).Fault is not null);

        // Upper 99.9 % point of a binomial by its normal approximation; and the tests must not be dead.
        Assert.InRange(alarms, 1, (Rate * Boards) + (3.09 * Math.Sqrt(Boards * Rate * (1 - Rate))));
    }

    private static IReadOnlyList<LoadPointReadings> Disturb(
        IReadOnlyList<LoadPointReadings> readings, Func<LoadPointReadings, bool> which,
        Func<double, int, double> change) =>
        [.. readings.Select(read => !which(read) ? read : read with
        {
            Readings = [.. read.Readings.Select((reading, i) => SourceBench.Valid(change(reading.Volt, i)))],
        })];

    private static StateResult Evaluate(StateJob job, IReadOnlyList<LoadPointReadings> readings) =>
        StateEvaluation.Evaluate(
            job, readings, new(Draw.TemperatureDegC, Draw.TemperatureUncertaintyDegC), 40, SourceBench.Start);

    private static void AssertFault(StateResult result, SourceFaultKind kind, Decision decision, string words)
    {
        Assert.NotNull(result.Fault);
        Assert.Equal(kind, result.Fault.Kind);
        Assert.Contains(words, result.Fault.Words, StringComparison.Ordinal);
        Assert.Equal(decision, result.Decision);
        Assert.Null(result.Estimate);
    }
}
