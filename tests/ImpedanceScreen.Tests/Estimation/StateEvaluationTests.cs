using ImpedanceScreen.Bench;
using ImpedanceScreen.Decisions;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Quantities;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Reference;

namespace ImpedanceScreen.Tests.Estimation;

public sealed class StateEvaluationTests
{
    private static readonly Uncertain Temperature = new(Draw.TemperatureDegC, Draw.TemperatureUncertaintyDegC);

    [Theory]
    [InlineData(5, 100, 0, Sensing.TwoWire)]
    [InlineData(5, 100, 0, Sensing.Terminal)]
    [InlineData(-5, 100, 0, Sensing.Terminal)]
    [InlineData(0, 50, 5, Sensing.Terminal)]
    [InlineData(0.2, 30, 5, Sensing.TwoWire)]
    public void A_good_board_passes_with_the_truth_inside_its_interval(
        double vth, double rth, double rail, Sensing sensing)
    {
        StateJob job = SourceBench.Job(vth, rth, rail, sensing);
        StateResult result = Evaluate(job, new SourceBench(3).Read(job, vth, rth));
        Assert.Null(result.Fault);
        Assert.Equal(Decision.Pass, result.Decision);
        Estimate estimate = result.Estimate!;
        Assert.InRange(Math.Abs(estimate.SourceVoltageVolt - vth), 0, 3 * estimate.SourceVoltageUncertaintyVolt);
        Assert.InRange(
            Math.Abs(estimate.InternalResistanceOhm - rth), 0, 3 * estimate.InternalResistanceUncertaintyOhm);
        Assert.Equal(4, estimate.DegreesOfFreedom);
    }

    [Fact]
    public void A_wrong_resistor_fails_its_limit_and_no_fault_is_named()
    {
        StateJob job = SourceBench.Job();
        StateResult result = Evaluate(job, new SourceBench(4).Read(job, 5, 120));
        Assert.Null(result.Fault);
        Assert.Equal(Decision.Fail, result.Decision);
        Assert.Equal(
            [Decision.Pass, Decision.Fail], result.Decisions.Select(decision => decision.Decision));
    }

    [Fact]
    public void A_negative_resistance_within_its_uncertainty_is_reported_as_it_is()
    {
        StateJob job = SourceBench.Job(
            rth: 0.001, sensing: Sensing.Terminal, contact: true,
            limits: [new(Limits.Quantity.InternalResistance, null, 1, new(1), null)]);
        double[] ohms = [.. Enumerable.Range(0, 12).Select(
            seed => Evaluate(job, new SourceBench(seed).Read(job, 5, 0)).Estimate!.InternalResistanceOhm)];
        Assert.Contains(ohms, ohm => ohm < 0);
    }

    [Fact]
    public void The_budget_adds_up_to_the_uncertainty_and_to_what_the_fit_alone_says()
    {
        StateJob job = SourceBench.Job();
        Estimate estimate = Evaluate(job, new SourceBench(5).Read(job, 5, 100)).Estimate!;
        double volt = Math.Sqrt(estimate.Budget.Sum(line => line.SourceVoltageVolt * line.SourceVoltageVolt));
        double ohm = Math.Sqrt(estimate.Budget.Sum(line => line.InternalResistanceOhm * line.InternalResistanceOhm));
        Assert.Equal(estimate.SourceVoltageUncertaintyVolt, volt, estimate.SourceVoltageUncertaintyVolt * 1e-3);
        Assert.Equal(estimate.InternalResistanceUncertaintyOhm, ohm, estimate.InternalResistanceUncertaintyOhm * 1e-3);
        BudgetTerm gain = Assert.Single(estimate.Budget, line => line.Name == "meter gain");
        Assert.Equal(5 * 30e-6 / Math.Sqrt(3), gain.SourceVoltageVolt, 1e-7);
        Assert.Equal(0, gain.InternalResistanceOhm, 1e-9);
        BudgetTerm lead = Assert.Single(estimate.Budget, line => line.Name == "lead");
        Assert.Equal(0.01, lead.InternalResistanceOhm);
        BudgetTerm certificate = Assert.Single(estimate.Budget, line => line.Name == "certificate C-7");
        Assert.Equal(-100 * 6e-5, certificate.InternalResistanceOhm, 2e-4);
        Assert.Equal(
            "branch, certificate C-7, lead, load L1000, load L220, load L3300, load L470, load temperature, "
                + "meter gain, "
            + "meter input resistance, meter offset, noise, resolution",
            string.Join(", ", estimate.Budget.Select(line => line.Name).Order(StringComparer.Ordinal)));
    }

    [Fact]
    public void The_droop_at_the_rated_load_does_not_depend_on_the_meters_gain()
    {
        Limits.QuantityLimit droop = new(Limits.Quantity.Droop, null, 0.2, new(1), 1000);
        StateJob job = SourceBench.Job(sensing: Sensing.Terminal, limits: [droop]);
        StateJob coarse = job with { Range = job.Range with { GainLimit = 0.01 } };
        IReadOnlyList<LoadPointReadings> readings = new SourceBench(6).Read(job, 5, 100);
        LimitDecision fine = Evaluate(job, readings).Decisions[0];
        Assert.Equal(100.0 / 1100, fine.Value, 3 * fine.ExpandedUncertainty);
        Assert.Equal(fine.ExpandedUncertainty, Evaluate(coarse, readings).Decisions[0].ExpandedUncertainty, 1e-9);
    }

    [Fact]
    public void A_plan_cut_short_never_passes()
    {
        StateJob job = SourceBench.Job();
        IReadOnlyList<LoadPointReadings> readings = new SourceBench(7).Read(job, 5, 100);
        StateResult result = Evaluate(job, [.. readings.Take(4)]);
        Assert.NotNull(result.Estimate);
        Assert.Equal(Decision.Undecided, result.Decision);
    }

    [Fact]
    public void The_same_readings_give_the_same_result_to_the_bit()
    {
        StateJob job = SourceBench.Job();
        IReadOnlyList<LoadPointReadings> readings = new SourceBench(8).Read(job, 5, 100);
        StateResult one = Evaluate(job, readings);
        StateResult other = Evaluate(job, readings);
        Assert.Equal(one.Decisions, other.Decisions);
        Assert.Equal(one.Estimate!.Budget, other.Estimate!.Budget);
        Assert.Equal(one.Estimate with { Budget = [] }, other.Estimate with { Budget = [] });
    }

    [Fact]
    public void Readings_are_kept_as_the_meter_sent_them_with_their_time_in_the_attempt()
    {
        StateJob job = SourceBench.Job();
        var reading = new MeterReading("+5.1E0", ReadingCondition.Valid, 5.1, SourceBench.Start.AddMilliseconds(1234));
        StateResult result = Evaluate(job, [new(new LoadPoint(null), null, [reading])]);
        Assert.Equal(new ReadingRecord(1234, "+5.1E0"), result.Points[0].Readings[0]);
        Assert.Null(result.Points[0].Load);
        Assert.Equal(Decision.Undecided, result.Decision);
        Assert.All(result.Decisions, decision => Assert.True(double.IsNaN(decision.Value)));
    }

    [Fact]
    public void A_plan_that_cannot_see_the_resistance_promises_no_uncertainty()
    {
        Assert.All(PlannedUncertainty.Of(SourceBench.Job(), Temperature), value => Assert.True(double.IsFinite(value)));
        Assert.All(
            PlannedUncertainty.Of(SourceBench.Job(vth: 0), Temperature),
                value => Assert.True(double.IsInfinity(value)));
    }

    private static StateResult Evaluate(StateJob job, IReadOnlyList<LoadPointReadings> readings) =>
        StateEvaluation.Evaluate(job, readings, Temperature, 40, SourceBench.Start);
}
