using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// What every input contributes to the uncertainty of Vth and Rth (JCGM 100:2008, clause 5). Made once a record; the
/// fit
/// itself is free of it.
/// </summary>
internal sealed class UncertaintyBudget
{
    private UncertaintyBudget(IReadOnlyList<Contribution> contributions) => Contributions = contributions;

    /// <summary>One for each single input, signed.</summary>
    public IReadOnlyList<Contribution> Contributions { get; }

    public double VoltUncertainty => Math.Sqrt(Contributions.Sum(part => part.Volt * part.Volt));

    public double OhmUncertainty => Math.Sqrt(Contributions.Sum(part => part.Ohm * part.Ohm));

    public double Covariance => Contributions.Sum(part => part.Volt * part.Ohm);

    /// <summary>Forms the budget of a measurement at its estimate.</summary>
    /// <param name="measurement">The measurement.</param>
    /// <param name="sourceVolt">Vth, V.</param>
    /// <param name="ohm">All resistance ahead of the sensing point, Ω.</param>
    /// <returns>Null where the readings do not determine both values.</returns>
    public static UncertaintyBudget? Of(StateMeasurement measurement, double sourceVolt, double ohm)
    {
        var errors = new InputErrors(measurement, sourceVolt, ohm);
        InputError[] inputs = [.. errors.All()];
        (double[] perVolt, double[] perOhm) = errors.Jacobian;
        int points = perVolt.Length;
        double[] covariance = new double[points * points];
        foreach (InputError input in inputs.Where(candidate => candidate.Weighs))
        {
            AddSquare(covariance, input.Volt);
        }

        if (!SmallCholesky.Factor(covariance, points, points))
        {
            return null;
        }

        SmallCholesky.SolveLower(covariance, points, points, perVolt);
        SmallCholesky.SolveLower(covariance, points, points, perOhm);
        double vv = Dot(perVolt, perVolt);
        double vr = Dot(perVolt, perOhm);
        double rr = Dot(perOhm, perOhm);
        double determinant = (vv * rr) - (vr * vr);
        if (!(determinant > 1e-14 * vv * rr))
        {
            return null;
        }

        return new([.. inputs.Select(input =>
        {
            double[] column = [.. input.Volt];
            SmallCholesky.SolveLower(covariance, points, points, column);
            double v = Dot(perVolt, column);
            double r = Dot(perOhm, column);
            double volt = ((rr * v) - (vr * r)) / determinant;
            double resistance = ((vv * r) - (vr * v)) / determinant;
            return new Contribution(input, volt, resistance + input.Ohm);
        })]);
    }

    /// <summary>Distribution of the error of a quantity that depends on Vth, Rth and the return voltage.</summary>
    /// <param name="perVolt">Its derivative by Vth.</param>
    /// <param name="perOhm">Its derivative by Rth.</param>
    /// <param name="perReturnVolt">Its derivative by the return voltage.</param>
    public ErrorDistribution Along(double perVolt, double perOhm, double perReturnVolt)
    {
        double total = 0;
        double widest = 0;
        double second = 0;
        var groups = new Dictionary<string, (double Variance, double Degrees)>(StringComparer.Ordinal);
        foreach (Contribution part in Contributions)
        {
            double effect = (perVolt * part.Volt) + (perOhm * part.Ohm) + (perReturnVolt * part.Input.ReturnVolt);
            double variance = effect * effect;
            total += variance;
            if (part.Input.Distribution == InputDistribution.Rectangular)
            {
                second = Math.Max(second, Math.Min(widest, variance));
                widest = Math.Max(widest, variance);
            }

            if (double.IsFinite(part.Input.DegreesOfFreedom))
            {
                double before = groups.GetValueOrDefault(part.Input.Name).Variance;
                groups[part.Input.Name] = (before + variance, part.Input.DegreesOfFreedom);
            }
        }

        // Welch-Satterthwaite (JCGM 100:2008, G.4) over sources, never over readings.
        double rest = Math.Max(0, total - widest - second);
        double sum = groups.Values.Sum(group => group.Variance * group.Variance / group.Degrees);
        double degrees = sum > 0 ? rest * rest / sum : double.PositiveInfinity;

        // Beyond ten thousand the t distribution's factor is the normal one's within 0.01 %.
        return new(
            Math.Sqrt(rest), degrees > 1e4 ? double.PositiveInfinity : degrees, Math.Sqrt(3 * widest),
            Math.Sqrt(3 * second));
    }

    /// <summary>
    /// The lines of the budget, largest share first, 4 significant digits. A line that stands for several independent
    /// inputs (noise of all points, all branches) is their root sum of squares with the sign of their covariance.
    /// </summary>
    public IReadOnlyList<BudgetTerm> Lines()
    {
        double volt = VoltUncertainty;
        double ohm = OhmUncertainty;
        return [.. Contributions
            .GroupBy(part => part.Input.Name, StringComparer.Ordinal)
            .Select(Line)
            .OrderByDescending(line => Math.Max(
                Math.Abs(line.SourceVoltageVolt / volt), Math.Abs(line.InternalResistanceOhm / ohm)))
            .ThenBy(line => line.Name, StringComparer.Ordinal)];
    }

    private static BudgetTerm Line(IGrouping<string, Contribution> group)
    {
        Contribution first = group.First();
        double volt = first.Volt;
        double ohm = first.Ohm;
        if (group.Skip(1).Any())
        {
            volt = Math.Sqrt(group.Sum(part => part.Volt * part.Volt));
            double both = group.Sum(part => part.Volt * part.Ohm);
            ohm = Math.CopySign(Math.Sqrt(group.Sum(part => part.Ohm * part.Ohm)), both);
        }

        return new(
            group.Key,
            first.Input.Type,
            first.Input.Distribution,
            Rounding.Significant(volt, Rounding.BudgetDigits),
            Rounding.Significant(ohm, Rounding.BudgetDigits),
            first.Input.DegreesOfFreedom);
    }

    private static void AddSquare(double[] matrix, double[] column)
    {
        for (int i = 0; i < column.Length; i++)
        {
            for (int k = 0; column[i] != 0 && k < column.Length; k++)
            {
                matrix[(i * column.Length) + k] += column[i] * column[k];
            }
        }
    }

    private static double Dot(double[] left, double[] right)
    {
        double sum = 0;
        for (int i = 0; i < left.Length; i++)
        {
            sum += left[i] * right[i];
        }

        return sum;
    }
}
