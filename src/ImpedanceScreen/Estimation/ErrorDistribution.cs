using System.Runtime.InteropServices;
using ImpedanceScreen.Statistics;
using MathNet.Numerics.Distributions;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// Distribution of the error of an estimate: its largest rectangular input convolved exactly with a normal distribution
/// (a t distribution where its degrees of freedom are finite) for all the rest. EA-4/02 M:2022 supplement S9 is the case
/// of a dominating rectangular input.
/// </summary>
/// <param name="RestUncertainty">Standard uncertainty of the rest, in the unit of the estimate.</param>
/// <param name="DegreesOfFreedom">Effective degrees of freedom of the rest, above 1; infinite for normal.</param>
/// <param name="RectangularHalfWidth">Half width of the rectangular input; 0 where there is none.</param>
[StructLayout(LayoutKind.Auto)]
public readonly record struct ErrorDistribution(
    double RestUncertainty, double DegreesOfFreedom, double RectangularHalfWidth)
{
    /// <summary>Combined standard uncertainty.</summary>
    public double StandardUncertainty =>
        Math.Sqrt((RestUncertainty * RestUncertainty) + (RectangularHalfWidth * RectangularHalfWidth / 3));

    /// <summary>Probability that the error is at most <paramref name="error"/>.</summary>
    public double Cumulative(double error)
    {
        if (double.IsInfinity(error))
        {
            return error > 0 ? 1 : 0;
        }

        // From the nearer tail, so that small probabilities keep their digits.
        if (error > 0)
        {
            return 1 - Cumulative(-error);
        }

        double half = RectangularHalfWidth;
        if (RestUncertainty == 0)
        {
            return half == 0 ? (error < 0 ? 0 : 0.5) : Math.Clamp((error + half) / (2 * half), 0, 1);
        }

        // A rectangle this narrow against the rest changes nothing that a double can show.
        if (half < 1e-4 * RestUncertainty)
        {
            return Rest(error / StandardUncertainty);
        }

        double above = RestIntegral((error + half) / RestUncertainty);
        double below = RestIntegral((error - half) / RestUncertainty);
        return RestUncertainty / (2 * half) * (above - below);
    }

    /// <summary>Factor k by which the standard uncertainty is multiplied for an interval that holds the true value.</summary>
    /// <param name="probability">Probability of the interval, as 0.95.</param>
    /// <returns>The factor; NaN where there is no uncertainty.</returns>
    public double CoverageFactor(double probability)
    {
        double unit = StandardUncertainty;
        if (!(unit > 0) || double.IsInfinity(unit))
        {
            return double.NaN;
        }

        // The tail falls with k, so halving the bracket always ends; 60 halvings exhaust a double.
        double tail = 0.5 * (1 - probability);
        double low = 0;
        double high = 64;
        for (int i = 0; i < 60; i++)
        {
            double middle = 0.5 * (low + high);
            bool outside = Cumulative(-middle * unit) > tail;
            low = outside ? middle : low;
            high = outside ? high : middle;
        }

        return 0.5 * (low + high);
    }

    private double Rest(double z) => double.IsInfinity(DegreesOfFreedom)
        ? ErrorFunction.Normal(z)
        : StudentT.CDF(0, 1, DegreesOfFreedom, z);

    // Integral of the distribution function from minus infinity: z F(z) + f(z) for normal; for t the same with its
    // density times (nu + z²)/(nu - 1).
    private double RestIntegral(double z)
    {
        double nu = DegreesOfFreedom;
        double density = double.IsInfinity(nu)
            ? Math.Exp(-0.5 * z * z) / Math.Sqrt(2 * Math.PI)
            : StudentT.PDF(0, 1, nu, z) * (nu + (z * z)) / (nu - 1);
        return (z * Rest(z)) + density;
    }
}
