namespace ImpedanceScreen.Estimation;

/// <summary>
/// The start of a fit: the weighted line of the readings against the current that the stated loads and the meter take,
/// <c>V = Vth - R I</c>. Zero and negative voltages are ordinary, so nothing is divided by a reading.
/// </summary>
internal static class StartLine
{
    public static (double SourceVolt, double Ohm) Fit(in FitProblem problem)
    {
        double weights = 0;
        double currents = 0;
        double volts = 0;
        foreach (ref readonly FitPoint point in problem.Points)
        {
            double weight = Weight(point);
            weights += weight;
            currents += weight * Current(problem, point);
            volts += weight * point.Volt;
        }

        double meanCurrent = currents / weights;
        double meanVolt = volts / weights;
        double square = 0;
        double product = 0;
        foreach (ref readonly FitPoint point in problem.Points)
        {
            double weight = Weight(point);
            double current = Current(problem, point) - meanCurrent;
            square += weight * current * current;
            product += weight * current * (point.Volt - meanVolt);
        }

        // Without any current there is no resistance to see; the equations will say so.
        double ohm = square > 0 ? -product / square : 0;
        return (meanVolt + (ohm * meanCurrent), ohm);
    }

    private static double Weight(in FitPoint point) =>
        1 / (point.StandardUncertaintyVolt * point.StandardUncertaintyVolt);

    private static double Current(in FitProblem problem, in FitPoint point)
    {
        double load = point.Load < 0 ? 0 : (point.Volt - problem.ReturnVolt) / problem.Loads[point.Load].Ohm;
        return load + (point.Volt * problem.MeterSiemens);
    }
}
