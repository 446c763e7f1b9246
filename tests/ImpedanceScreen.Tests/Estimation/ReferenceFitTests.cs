using CsCheck;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Reference;

namespace ImpedanceScreen.Tests.Estimation;

/// <summary>The estimator against MathNet.Numerics 5.0.0's Levenberg-Marquardt on the same objective.</summary>
public sealed class ReferenceFitTests
{
    [Fact]
    public void Agrees_with_an_independent_minimiser_over_random_problems() =>
        Gen.Int[0, int.MaxValue - 1].Sample(
            seed => Compare(FitCase.Draw(new Random(seed), (seed & 1) * 5.0)), seed: "0N0XIzNsQ0O2", iter: 500,
                threads: 1);

    [Fact]
    public void Agrees_where_one_load_is_used_twice_and_errors_are_coarse()
    {
        for (int seed = 0; seed < 50; seed++)
        {
            FitCase drawn = FitCase.Draw(new Random(seed));
            FitPoint[] points = [.. drawn.Points, drawn.Points[^1]];
            FitPoint twice = points[^1];
            points[^1] = twice with { Volt = twice.Volt + (3 * twice.StandardUncertaintyVolt) };
            FitLoad[] coarse = [.. drawn.Loads.Select(load => load with { IndividualOhm = load.Ohm * 0.01 })];
            Compare(drawn with { Points = points, Loads = coarse });
        }
    }

    private static void Compare(FitCase drawn)
    {
        SourceFit fit = SourceFitter.Fit(drawn.Problem);
        Assert.True(fit.Converged);
        var reference = new ReferenceFit(drawn);
        var (volt, ohm, chiSquared, covariance) = reference.Fit(fit.SourceVoltageVolt * 1.001,
            fit.ResistanceOhm * 1.01);
        AssertClose(volt, fit.SourceVoltageVolt);
        AssertClose(ohm, fit.ResistanceOhm);
        AssertClose(chiSquared, fit.ChiSquared);
        AssertClose(covariance[0, 0], fit.VoltageVariance);
        AssertClose(covariance[1, 1], fit.ResistanceVariance);
        double scale = Math.Sqrt(fit.VoltageVariance * fit.ResistanceVariance);
        Assert.Equal(covariance[0, 1] / scale, fit.Covariance / scale, 1e-8);
        AssertClose(reference.PValue(chiSquared), fit.PValue);
    }

    private static void AssertClose(double expected, double actual) =>
        Assert.True(Math.Abs(expected - actual) <= 1e-8 * Math.Abs(expected), $"{expected:R} and {actual:R}");
}
