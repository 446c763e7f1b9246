namespace ImpedanceScreen.Statistics;

/// <summary>
/// The complementary error function to double precision without allocation: rational approximations of W. J. Cody,
/// Mathematics of Computation 23 (1969), 631-637.
/// </summary>
public static class ErrorFunction
{
    private const double InverseRootPi = 0.56418958354775628695;

    /// <summary>erfc(x) = 1 - erf(x), with full relative precision in the upper tail.</summary>
    public static double Complementary(double x)
    {
        double y = Math.Abs(x);
        if (y <= 0.46875)
        {
            return 1 - Small(x);
        }

        if (double.IsNaN(x))
        {
            return x;
        }

        double tail = y > 26.6 ? 0 : Exponential(y) * (y <= 4 ? Middle(y) : Large(y));
        return x < 0 ? 2 - tail : tail;
    }

    /// <summary>The standard normal distribution function, with full relative precision in the lower tail.</summary>
    public static double Normal(double z) => 0.5 * Complementary(-z * Math.Sqrt(0.5));

    // erf for small arguments.
    private static double Small(double x)
    {
        double z = x * x;
        double top = 1.85777706184603153e-1 * z;
        top = (top + 3.16112374387056560e00) * z;
        top = (top + 1.13864154151050156e02) * z;
        top = (top + 3.77485237685302021e02) * z;
        double bottom = (z + 2.36012909523441209e01) * z;
        bottom = (bottom + 2.44024637934444173e02) * z;
        bottom = (bottom + 1.28261652607737228e03) * z;
        return x * (top + 3.20937758913846947e03) / (bottom + 2.84423683343917062e03);
    }

    private static double Middle(double y)
    {
        double top = 2.15311535474403846e-8 * y;
        top = (top + 5.64188496988670089e-1) * y;
        top = (top + 8.88314979438837594e00) * y;
        top = (top + 6.61191906371416295e01) * y;
        top = (top + 2.98635138197400131e02) * y;
        top = (top + 8.81952221241769090e02) * y;
        top = (top + 1.71204761263407058e03) * y;
        top = (top + 2.05107837782607147e03) * y;
        double bottom = (y + 1.57449261107098347e01) * y;
        bottom = (bottom + 1.17693950891312499e02) * y;
        bottom = (bottom + 5.37181101862009858e02) * y;
        bottom = (bottom + 1.62138957456669019e03) * y;
        bottom = (bottom + 3.29079923573345963e03) * y;
        bottom = (bottom + 4.36261909014324716e03) * y;
        bottom = (bottom + 3.43936767414372164e03) * y;
        return (top + 1.23033935479799725e03) / (bottom + 1.23033935480374942e03);
    }

    private static double Large(double y)
    {
        double z = 1 / (y * y);
        double top = 1.63153871373020978e-2 * z;
        top = (top + 3.05326634961232344e-1) * z;
        top = (top + 3.60344899949804439e-1) * z;
        top = (top + 1.25781726111229246e-1) * z;
        top = (top + 1.60837851487422766e-2) * z;
        double bottom = (z + 2.56852019228982242e00) * z;
        bottom = (bottom + 1.87295284992346725e00) * z;
        bottom = (bottom + 5.27905102951428412e-1) * z;
        bottom = (bottom + 6.05183413124413191e-2) * z;
        double ratio = z * (top + 6.58749161529837803e-4) / (bottom + 2.33520497626869185e-3);
        return (InverseRootPi - ratio) / y;
    }

    // exp(-y²) with y² split, so that the rounding of the square is not magnified.
    private static double Exponential(double y)
    {
        double coarse = Math.Truncate(y * 16) / 16;
        return Math.Exp(-coarse * coarse) * Math.Exp(-(y - coarse) * (y + coarse));
    }
}
