using System.Runtime.InteropServices;
using ImpedanceScreen.Statistics;
using MathNet.Numerics.Distributions;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// Distribution of the error of an estimate: its two widest rectangular inputs convolved exactly with a normal
/// distribution (a t distribution where its degrees of freedom are finite) for all the rest. With a second rectangle
/// of a
/// third of the first, as offset beside gain, one rectangle alone would hold 94.4 % instead of 95 %.
/// </summary>
/// <param name="RestUncertainty">Standard uncertainty of the rest, in the unit of the estimate.</param>
/// <param name="DegreesOfFreedom">Effective degrees of freedom of the rest, above 2; infinite for normal.</param>
/// <param name="HalfWidth">Half width of the widest rectangular input; 0 where there is none.</param>
/// <param name="SecondHalfWidth">Half width of the second; 0 where there is none.</param>
[StructLayout(LayoutKind.Auto)]
public readonly record struct ErrorDistribution(
    double RestUncertainty, double DegreesOfFreedom, double HalfWidth = 0, double SecondHalfWidth = 0)
{
    /// <summary>
    /// A rectangle narrower than this part of the rest is part of the rest: nobody can see its corners.
    /// </summary>
    private const double Narrow = 0.01;

    /// <summary>Combined standard uncertainty.</summary>
    public double StandardUncertainty => Math.Sqrt(
        (RestUncertainty * RestUncertainty) + (((HalfWidth * HalfWidth) + (SecondHalfWidth * SecondHalfWidth)) / 3));

    /// <summary>Probability that the error is at most <paramref name="error"/>.</summary>
    public double Cumulative(double error)
    {
        if (double.IsInfinity(error))
        {
            return error > 0 ? 1 : 0;
        }

        // From the nearer tail, so that small probabilities keep their digits.
        return error > 0 ? 1 - Lower(-error) : Lower(error);
    }

    /// <summary>
    /// Factor k by which the standard uncertainty is multiplied for an interval that holds the true value.
    /// </summary>
    /// <param name="probability">Probability of the interval, as 0.95.</param>
    /// <returns>The factor; NaN where there is no uncertainty.</returns>
    public double CoverageFactor(double probability)
    {
        double unit = StandardUncertainty;
        if (!(unit > 0) || double.IsInfinity(unit))
        {
            return double.NaN;
        }

        // False position with the Illinois rule (M. Dowell, P. Jarratt, BIT 11, 1971); the bracket holds any k asked
        // for.
        double tail = 0.5 * (1 - probability);
        double low = 0;
        double atLow = 0.5 - tail;
        double high = 2;
        double atHigh = Lower(-high * unit) - tail;
        while (atHigh > 0)
        {
            low = high;
            atLow = atHigh;
            high *= 2;
            atHigh = Lower(-high * unit) - tail;
        }

        double k = high;
        for (int i = 0; i < 100 && high - low > 1e-13 * high && atHigh != 0; i++)
        {
            k = high - (atHigh * (high - low) / (atHigh - atLow));
            double at = Lower(-k * unit) - tail;
            if (Math.Abs(at) < 1e-15)
            {
                break;
            }

            if (at > 0)
            {
                (low, atLow, atHigh) = (k, at, atHigh * 0.5);
            }
            else
            {
                (high, atHigh, atLow) = (k, at, atLow * 0.5);
            }
        }

        return k;
    }

    private double Lower(double error)
    {
        double rest = RestUncertainty;
        double a = HalfWidth;
        double b = SecondHalfWidth;
        if (b <= Narrow * rest)
        {
            rest = Math.Sqrt((rest * rest) + (b * b / 3));
            b = 0;
        }

        if (a <= Narrow * rest)
        {
            rest = Math.Sqrt((rest * rest) + (a * a / 3));
            a = 0;
        }

        if (a == 0)
        {
            return rest == 0 ? (error < 0 ? 0 : 0.5) : Rest(error / rest);
        }

        if (b == 0)
        {
            return (Once(rest, error + a) - Once(rest, error - a)) / (2 * a);
        }

        double outer = Twice(rest, error + a + b) + Twice(rest, error - a - b);
        double inner = Twice(rest, error + a - b) + Twice(rest, error - a + b);
        return (outer - inner) / (4 * a * b);
    }

    private double Rest(double z) => double.IsInfinity(DegreesOfFreedom)
        ? ErrorFunction.Normal(z)
        : StudentT.CDF(0, 1, DegreesOfFreedom, z);

    // First moment of the standardised rest below z, with its sign turned.
    private double Moment(double z)
    {
        double nu = DegreesOfFreedom;
        return double.IsInfinity(nu)
            ? Math.Exp(-0.5 * z * z) / Math.Sqrt(2 * Math.PI)
            : StudentT.PDF(0, 1, nu, z) * (nu + (z * z)) / (nu - 1);
    }

    // Integral of the distribution function of the rest from minus infinity to x.
    private double Once(double rest, double x) =>
        rest == 0 ? Math.Max(0, x) : rest * ((x / rest * Rest(x / rest)) + Moment(x / rest));

    // The same integrated once more: half the mean square of what x lies above the rest.
    private double Twice(double rest, double x)
    {
        if (rest == 0)
        {
            return 0.5 * Math.Max(0, x) * Math.Max(0, x);
        }

        double z = x / rest;
        double nu = DegreesOfFreedom;
        double below = Rest(z);
        double moment = Moment(z);
        double square = double.IsInfinity(nu)
            ? below - (z * moment)
            : ((nu * below) - ((nu - 1) * z * moment)) / (nu - 2);
        return 0.5 * rest * rest * ((z * z * below) + (2 * z * moment) + square);
    }
}
