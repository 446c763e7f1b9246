using ImpedanceScreen.Estimation;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Quantities;
using ImpedanceScreen.Reference;

namespace ImpedanceScreen.Tests.Estimation;

public sealed class CoverageTests
{
    /// <summary>
    /// EA-4/02 M:2013, S9: the resolution of ±0.05 V dominates, u = 0.030 V and U = 0.05 V. The printed k = 1.65 is the
    /// rectangle's own factor; that of the whole sum is 1.71 and gives the same U to the printed digit.
    /// </summary>
    [Fact]
    public void A_dominating_rectangle_gives_the_uncertainty_of_EA_4_02_S9()
    {
        var error = new ErrorDistribution(0.001, double.PositiveInfinity, 0.05, 0.011);
        Assert.Equal(0.0295747640171, error.StandardUncertainty, 1e-12);
        double k = error.CoverageFactor(0.95);
        Assert.Equal(0.05, Math.Round(k * error.StandardUncertainty, 2));
        var alone = new ErrorDistribution(0, double.PositiveInfinity, 0.05);
        Assert.Equal(1.65, Math.Round(alone.CoverageFactor(0.95), 2));

        // The two rectangles by themselves: the trapezoid's tail (a + b - x)²/(4 a b) = 0.05.
        double exact = 0.061 - Math.Sqrt(0.05 * 4 * 0.05 * 0.011);
        Assert.Equal(exact, k * error.StandardUncertainty, 1e-4);
    }

    [Fact]
    public void A_rectangle_alone_has_the_exact_factor() =>
        Assert.Equal(0.95 * Math.Sqrt(3), new ErrorDistribution(0, double.PositiveInfinity, 1).CoverageFactor(0.95),
            1e-12);

    /// <summary>
    /// Normal quantile 0.975 and JCGM 100:2008 Table G.2 (t 0.95, recomputed to 12 digits: G.4.1 with 18 degrees).
    /// </summary>
    [Theory]
    [InlineData(double.PositiveInfinity, 1.95996398454005)]
    [InlineData(18, 2.10092204024)]
    [InlineData(2, 4.30265272974946)]
    public void Without_a_rectangle_the_factor_is_the_quantile(double degrees, double factor) =>
        Assert.Equal(factor, new ErrorDistribution(3, degrees).CoverageFactor(0.95), 1e-9);

    /// <summary>
    /// JCGM 101:2008, 9.2.4: rectangular inputs 1, 1, 1, 10; exact half width 17.0158 (printed: 17.0).
    /// </summary>
    [Fact]
    public void One_dominating_rectangle_of_JCGM_101_9_2_4_is_met()
    {
        var error = new ErrorDistribution(Math.Sqrt(2), double.PositiveInfinity, 10 * Math.Sqrt(3), Math.Sqrt(3));
        Assert.Equal(17.0158, error.CoverageFactor(0.95) * error.StandardUncertainty, 0.02);
    }

    [Fact]
    public void Two_rectangles_with_a_t_distribution_agree_with_simulation()
    {
        var random = new Random(5);
        var error = new ErrorDistribution(1, 6, 2, 1);
        double bound = error.CoverageFactor(0.95) * error.StandardUncertainty;
        double Flat() => (2 * random.NextDouble()) - 1;
        const int Draws = 200_000;
        int inside = 0;
        for (int i = 0; i < Draws; i++)
        {
            double chiSquared = Enumerable.Range(0, 6).Sum(_ => Math.Pow(FitCase.Normal(random), 2));
            double t = FitCase.Normal(random) / Math.Sqrt(chiSquared / 6);
            inside += Math.Abs(t + (2 * Flat()) + Flat()) <= bound ? 1 : 0;
        }

        // 99.9 % limits of a binomial by its normal approximation.
        Assert.InRange(inside / (double)Draws, 0.95 - 0.0016, 0.95 + 0.0016);
    }

    /// <summary>
    /// 95 % intervals over many boards, every term drawn anew from its declared distribution; the bounds are the exact
    /// 99.9 % limits of the binomial with p = 0.95.
    /// </summary>
    [Theory]
    [InlineData(5, 100, 0, Sensing.TwoWire, 20_000)]
    [InlineData(5, 0.5, 0, Sensing.Terminal, 4000)]
    [InlineData(0.1, 40, 5, Sensing.TwoWire, 4000)]
    public void Intervals_hold_the_truth_as_often_as_they_say(
        double vth, double rth, double rail, Sensing sensing, int boards)
    {
        StateJob job = SourceBench.Job(vth, rth, rail, sensing, contact: true);
        var bench = new SourceBench(boards);
        var temperature = new Uncertain(Draw.TemperatureDegC, Draw.TemperatureUncertaintyDegC);
        int volts = 0;
        int ohms = 0;
        int estimates = 0;
        for (int board = 0; board < boards; board++)
        {
            Estimate? estimate = StateEvaluation.Evaluate(
                job, bench.Read(job, vth, rth), temperature, 40, SourceBench.Start).Estimate;
            if (estimate is null)
            {
                continue;
            }

            estimates++;
            volts += Holds(vth, estimate.SourceVoltageVolt, estimate.SourceVoltageUncertaintyVolt,
                estimate.SourceVoltageCoverage);
            ohms += Holds(rth, estimate.InternalResistanceOhm, estimate.InternalResistanceUncertaintyOhm,
                estimate.InternalResistanceCoverage);
        }

        // False alarms take a board away: at most 0.1 % are stated for the whole board.
        Assert.InRange(estimates, boards - (boards / 400), boards);
        Assert.InRange(volts, BinomialQuantile(estimates, 0.95, 0.0005), BinomialQuantile(estimates, 0.95, 0.9995));
        Assert.InRange(ohms, BinomialQuantile(estimates, 0.95, 0.0005), BinomialQuantile(estimates, 0.95, 0.9995));
    }

    private static int Holds(double truth, double value, double uncertainty, double k) =>
        Math.Abs(value - truth) <= k * uncertainty ? 1 : 0;

    private static int BinomialQuantile(int count, double probability, double level)
    {
        int low = 0;
        int high = count;
        while (low < high)
        {
            int middle = (low + high) / 2;
            bool below = MathNet.Numerics.Distributions.Binomial.CDF(probability, count, middle) < level;
            low = below ? middle + 1 : low;
            high = below ? high : middle;
        }

        return low;
    }
}
