namespace ImpedanceScreen.Estimation;

/// <summary>
/// The start of a fit: the weighted line of the readings against the current that the stated loads and the meter take,
/// <c>V = Vth - R I</c>. Zero and negative voltages are ordinary, so nothing is divided by a reading.
/// </summary>
internal static class StartLine
{
    /// <summary>Vth and resistance of the line.</summary>
    /// <param name="problem">The problem.</param>
    /// <param name="weights">For each point 1/u, 1/V.</param>
    public static (double SourceVolt, double Ohm) Fit(in FitProblem problem, ReadOnlySpan<double> weights)
    {
        // Sums about the first reading and current: those of a good source are close together.
        double volt = problem.Points[0].Volt;
        double current = Current(problem, problem.Points[0]);
        double count = 0;
        double x = 0;
        double y = 0;
        double xx = 0;
        double xy = 0;
        for (int i = 0; i < weights.Length; i++)
        {
            double weight = weights[i] * weights[i];
            double along = Current(problem, problem.Points[i]) - current;
            double up = problem.Points[i].Volt - volt;
            count += weight;
            x += weight * along;
            y += weight * up;
            xx += weight * along * along;
            xy += weight * along * up;
        }

        // Without any current there is no resistance to see; the equations will say so.
        double square = (count * xx) - (x * x);
        double ohm = square > 0 ? ((x * y) - (count * xy)) / square : 0;
        return (volt + (y / count) + (ohm * (current + (x / count))), ohm);
    }

    private static double Current(in FitProblem problem, in FitPoint point)
    {
        double load = point.Load < 0 ? 0 : (point.Volt - problem.ReturnVolt) / problem.Loads[point.Load].Ohm;
        return load + (point.Volt * problem.MeterSiemens);
    }
}
