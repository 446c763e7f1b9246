using ImpedanceScreen.Decisions;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Tests.Decisions;

public sealed class LimitJudgeTests
{
    /// <summary>U of a normal error with u = 1, k = 1.95996398 (9 digits as recorded).</summary>
    private const double U = 1.95996398;

    /// <summary>
    /// JCGM 106:2012, 7.4 (Zener voltage), 7.5 (viscosity): printed 0.92 and 0.66, recomputed to 12 digits.
    /// </summary>
    [Theory]
    [InlineData(-5.47, 0.05, null, -5.4, 0.919243340766)]
    [InlineData(13.6, 1.8, 12.5, 16.3, 0.662629786495)]
    public void Probability_of_conformity_is_that_of_JCGM_106(
        double value, double u, double? min, double? max, double probability)
    {
        LimitDecision decision = LimitJudge.Judge(Limit(min, max, 0), value, Normal(u), 0);
        Assert.Equal(probability, decision.ConformityProbability, 1e-9);
    }

    /// <summary>
    /// ILAC-G8:09/2019, Table 1: guard band w = r U with U = 2u, probability of false accept at the acceptance
    /// limit.
    /// </summary>
    [Theory]
    [InlineData(1.5, 0.00134989803163)]
    [InlineData(1, 0.0227501319482)]
    [InlineData(0.83, 0.0484572262667)]
    [InlineData(0, 0.5)]
    public void A_value_at_the_acceptance_limit_has_the_risk_of_ILAC_G8(double r, double risk)
    {
        LimitDecision decision = LimitJudge.Judge(Limit(null, 10, 0), 10 - (2 * r), Normal(1), 0);
        Assert.Equal(risk, 1 - decision.ConformityProbability, 1e-9);
    }

    [Theory]
    [InlineData(0, 5.0, Decision.Pass)]
    [InlineData(0, 10.0, Decision.Pass)]
    [InlineData(0, 10.0001, Decision.Fail)]
    [InlineData(0, -0.0001, Decision.Fail)]
    [InlineData(1, 10 - U, Decision.Pass)]
    [InlineData(1, 10 - U + 1e-6, Decision.Undecided)]
    [InlineData(1, 10 + U - 1e-6, Decision.Undecided)]
    [InlineData(1, 10 + U, Decision.Fail)]
    [InlineData(1, 0 + U, Decision.Pass)]
    [InlineData(1, 0 - U, Decision.Fail)]
    [InlineData(0.5, 1, Decision.Pass)]
    public void A_two_sided_limit_is_decided_at_its_guard_bands(double factor, double value, Decision expected) =>
        Assert.Equal(expected, LimitJudge.Judge(Limit(0, 10, factor), value, Normal(1), 0).Decision);

    [Fact]
    public void A_one_sided_limit_decides_on_its_side_only()
    {
        Assert.Equal(Decision.Pass, LimitJudge.Judge(Limit(null, 10, 1), -1e6, Normal(1), 0).Decision);
        Assert.Equal(Decision.Pass, LimitJudge.Judge(Limit(0, null, 1), 1e6, Normal(1), 0).Decision);
        Assert.Equal(Decision.Fail, LimitJudge.Judge(Limit(0, null, 1), -3, Normal(1), 0).Decision);
    }

    [Fact]
    public void The_guard_band_rests_on_the_planned_uncertainty_where_that_is_larger()
    {
        LimitDecision decision = LimitJudge.Judge(Limit(0, 10, 1), 7, Normal(1), 4);
        Assert.Equal(4, decision.GuardBand);
        Assert.Equal(Decision.Undecided, decision.Decision);
        Assert.Equal(U, decision.ExpandedUncertainty);
    }

    [Fact]
    public void Nothing_passes_without_an_uncertainty_that_is_known()
    {
        foreach (double planned in new[] { double.NaN, double.PositiveInfinity })
        {
            Assert.Equal(Decision.Undecided, LimitJudge.Judge(Limit(0, 10, 1), 5, Normal(1), planned).Decision);
        }

        Assert.Equal(Decision.Undecided, LimitJudge.Judge(Limit(0, 10, 1), double.NaN, Normal(1), 0).Decision);
    }

    [Theory]
    [InlineData(0.0, 10.0, 1, 4.9, false)]
    [InlineData(0.0, 10.0, 1, 5.0, true)]
    [InlineData(0.0, 10.0, 0.5, 9.9, false)]
    [InlineData(0.0, 10.0, 0, 1e9, false)]
    [InlineData(null, 10.0, 1, 1e9, false)]
    [InlineData(null, 10.0, 1, double.PositiveInfinity, true)]
    public void An_acceptance_zone_is_empty_when_the_guard_bands_meet(
        double? min, double? max, double factor, double u, bool empty) =>
        Assert.Equal(empty, AcceptanceZone.IsEmpty(Limit(min, max, factor), u));

    [Fact]
    public void Any_fail_fails_else_any_undecided_is_undecided_else_pass()
    {
        const Decision P = Decision.Pass;
        const Decision F = Decision.Fail;
        const Decision N = Decision.Undecided;
        Assert.Equal(P, LimitJudge.Combine([P, P]));
        Assert.Equal(F, LimitJudge.Combine([P, N, F]));
        Assert.Equal(F, LimitJudge.Combine([F, N]));
        Assert.Equal(N, LimitJudge.Combine([N, P]));
        Assert.Equal(N, LimitJudge.Combine([P, N, P]));
        Assert.Equal(N, LimitJudge.Combine([]));
    }

    private static QuantityLimit Limit(double? min, double? max, double factor) =>
        new(Quantity.SourceVoltage, min, max, new DecisionRule(factor), null);

    private static ErrorDistribution Normal(double u) => new(u, double.PositiveInfinity);
}
