using MathNet.Numerics;

namespace ImpedanceScreen.Statistics;

/// <summary>Upper tail probabilities, formed without cancellation.</summary>
public static class UpperTail
{
    /// <summary>
    /// Probability of a chi-squared of at least <paramref name="value"/>: the finite sums of the upper incomplete gamma
    /// function for integer and half-integer orders (all terms positive). No allocation.
    /// </summary>
    /// <param name="value">Chi-squared, zero or more.</param>
    /// <param name="degreesOfFreedom">1 or more; NaN is returned for none.</param>
    public static double ChiSquared(double value, int degreesOfFreedom)
    {
        if (degreesOfFreedom < 1 || double.IsNaN(value))
        {
            return double.NaN;
        }

        double x = 0.5 * Math.Max(0, value);
        bool even = (degreesOfFreedom & 1) == 0;
        double root = Math.Sqrt(x);
        double order = even ? 0 : 0.5;
        double term = even ? 1 : root * (2 / Math.Sqrt(Math.PI));
        double sum = 0;
        for (int k = degreesOfFreedom / 2; k > 0; k--)
        {
            sum += term;
            order += 1;
            term *= x / order;
        }

        sum *= Math.Exp(-x);
        return even ? sum : sum + ErrorFunction.Complementary(root);
    }

    /// <summary>Probability of a ratio of two variances (Fisher's F) of at least <paramref name="ratio"/>.</summary>
    /// <param name="ratio">The ratio, zero or more.</param>
    /// <param name="upperDegrees">Degrees of freedom of the variance above.</param>
    /// <param name="lowerDegrees">Degrees of freedom of the variance below.</param>
    public static double VarianceRatio(double ratio, double upperDegrees, double lowerDegrees) =>
        SpecialFunctions.BetaRegularized(
            0.5 * lowerDegrees, 0.5 * upperDegrees, lowerDegrees / (lowerDegrees + (upperDegrees * ratio)));

    /// <summary>Probability that |t| of Student's distribution is at least |<paramref name="value"/>|.</summary>
    /// <param name="value">The value of t.</param>
    /// <param name="degreesOfFreedom">Degrees of freedom, above zero.</param>
    public static double StudentTwoSided(double value, double degreesOfFreedom) =>
        VarianceRatio(value * value, 1, degreesOfFreedom);
}
