namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>A voltage that runs exponentially from where it is to a target.</summary>
internal static class Exponential
{
    /// <summary>Value after a time.</summary>
    public static double Value(double from, double target, double timeConstantSeconds, double afterSeconds) =>
        double.IsPositiveInfinity(timeConstantSeconds)
            ? from
            : target + ((from - target) * Decay(timeConstantSeconds, afterSeconds));

    /// <summary>Integral between two times after the beginning, V s.</summary>
    public static double Integral(
        double from, double target, double timeConstantSeconds, double startSeconds, double endSeconds)
    {
        if (double.IsPositiveInfinity(timeConstantSeconds))
        {
            return from * (endSeconds - startSeconds);
        }

        double fall = Decay(timeConstantSeconds, startSeconds) - Decay(timeConstantSeconds, endSeconds);
        return (target * (endSeconds - startSeconds)) + ((from - target) * timeConstantSeconds * fall);
    }

    private static double Decay(double timeConstantSeconds, double afterSeconds) => timeConstantSeconds > 0.0
        ? Math.Exp(-afterSeconds / timeConstantSeconds)
        : afterSeconds > 0.0 ? 0.0 : 1.0;
}
