using ImpedanceScreen.Statistics;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// Least squares for a Thevenin source over Vth, resistance and the true load values (errors in variables), with common
/// terms as correlated ones. No allocation, no matrix library. Common gain has no place here: it is applied afterwards.
/// </summary>
public static class SourceFitter
{
    private const int IterationLimit = 100;

    /// <summary>Fits from a start of its own: the weighted line of the readings against load current.</summary>
    /// <exception cref="ArgumentException">The problem is not as <see cref="FitProblem"/> describes.</exception>
    public static SourceFit Fit(in FitProblem problem)
    {
        Check(problem);
        var search = new GaussNewton(problem, stackalloc double[GaussNewton.WorkLength(problem)]);
        search.Start();
        return Minimise(problem, search);
    }

    /// <summary>Fits from a given start.</summary>
    /// <param name="problem">The problem.</param>
    /// <param name="sourceVolt">Start of Vth, V.</param>
    /// <param name="ohm">Start of the resistance, Ω.</param>
    /// <exception cref="ArgumentException">The problem is not as <see cref="FitProblem"/> describes.</exception>
    public static SourceFit Fit(in FitProblem problem, double sourceVolt, double ohm)
    {
        Check(problem);
        var search = new GaussNewton(problem, stackalloc double[GaussNewton.WorkLength(problem)]);
        search.Start(sourceVolt, ohm);
        return Minimise(problem, search);
    }

    /// <summary>
    /// Turns a fit with equal weights into one whose <em>uncertainties are unknown</em>: covariance scaled by the
    /// residual
    /// variance s², no p-value. For comparison with published fits only, never for a board.
    /// </summary>
    /// <param name="fit">A fit whose points all had one uncertainty and that had no other error.</param>
    public static SourceFit WithUncertaintiesUnknown(in SourceFit fit)
    {
        double scale = fit.ChiSquared / fit.DegreesOfFreedom;
        return fit with
        {
            VoltageVariance = fit.VoltageVariance * scale,
            ResistanceVariance = fit.ResistanceVariance * scale,
            Covariance = fit.Covariance * scale,
            PValue = double.NaN,
        };
    }

    private static void Check(in FitProblem problem)
    {
        if (problem.Mistake() is { } mistake)
        {
            throw new ArgumentException(mistake, nameof(problem));
        }
    }

    private static SourceFit Minimise(in FitProblem problem, in GaussNewton search)
    {
        double best = double.PositiveInfinity;
        double before = double.NaN;
        for (int iteration = 1; iteration <= IterationLimit; iteration++)
        {
            double objective = search.Linearise();
            if (!double.IsFinite(objective) && iteration == 1)
            {
                return Failed(problem, iteration);
            }

            if (!(objective <= (best * (1 + 1e-8)) + (1e3 * search.RoundingFloor)))
            {
                search.HalveStep();
                before = double.NaN;
                continue;
            }

            best = objective;
            if (!search.Step(out double decrement))
            {
                return Failed(problem, iteration);
            }

            if (HasConverged(decrement, before, objective, search.RoundingFloor))
            {
                return Result(problem, search, Math.Max(0, objective - decrement), iteration);
            }

            before = decrement;
        }

        return Failed(problem, IterationLimit);
    }

    // The error that remains after a step is estimated from how fast steps shrink; it and the step itself (at whose
    // start the covariance was formed) have to be small against the uncertainty, or against the scatter if that is
    // less.
    private static bool HasConverged(double decrement, double before, double objective, double floor)
    {
        double scale = Math.Min(1, objective);
        return decrement <= floor
            || (decrement < 1e-13 * scale && decrement * decrement < 1e-22 * scale * before);
    }

    private static SourceFit Result(in FitProblem problem, in GaussNewton search, double chiSquared, int iterations)
    {
        (double volt, double ohm, double both) = search.Covariance();
        int degrees = problem.Points.Length - 2;
        double pValue = UpperTail.ChiSquared(chiSquared, degrees);
        return new(search.SourceVolt, search.Ohm, volt, ohm, both, chiSquared, degrees, pValue, iterations, true);
    }

    private static SourceFit Failed(in FitProblem problem, int iterations)
    {
        const double None = double.NaN;
        return new(None, None, None, None, None, None, problem.Points.Length - 2, None, iterations, false);
    }
}
