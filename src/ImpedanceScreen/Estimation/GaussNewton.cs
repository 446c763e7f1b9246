namespace ImpedanceScreen.Estimation;

/// <summary>
/// Gauss-Newton on the readings with true load values and common terms as further unknowns. Each load's own error is
/// rotated out of the linearised equations and recovered after the step, so that only the common terms, Vth and the
/// resistance stand in the matrix; linearised at the load values of the moment, it ends at the minimum of the whole
/// objective. Common terms stand first: the factor's last corner is then that of the two values looked for.
/// </summary>
internal readonly ref struct GaussNewton
{
    private readonly FitProblem problem;
    private readonly int size;
    private readonly int firstLoadTerm;
    private readonly int returnTerm;
    private readonly double floor;
    private readonly Span<double> matrix;
    private readonly Span<double> gradient;
    private readonly Span<double> row;
    private readonly Span<double> values;
    private readonly Span<double> steps;
    private readonly Span<double> loadErrors;
    private readonly Span<double> loadSteps;
    private readonly Span<double> loadPulls;
    private readonly Span<double> loadRows;
    private readonly Span<double> loadDiagonals;

    public GaussNewton(in FitProblem problem, Span<double> work)
    {
        this.problem = problem;
        size = SizeOf(problem);
        returnTerm = problem.OffsetUncertaintyVolt > 0 ? 1 : 0;
        firstLoadTerm = returnTerm + (problem.ReturnUncertaintyVolt > 0 ? 1 : 0);
        int loads = problem.Loads.Length;
        matrix = work[..(size * size)];
        work = work[(size * size)..];
        gradient = work[..size];
        row = work.Slice(size, size);
        values = work.Slice(2 * size, size);
        steps = work.Slice(3 * size, size);
        work = work[(4 * size)..];
        loadErrors = work[..loads];
        loadSteps = work.Slice(loads, loads);
        loadPulls = work.Slice(2 * loads, loads);
        loadDiagonals = work.Slice(3 * loads, loads);
        loadRows = work.Slice(4 * loads, loads * size);
        double sum = 0;
        foreach (ref readonly FitPoint point in problem.Points)
        {
            double ratio = point.Volt / point.StandardUncertaintyVolt;
            sum += ratio * ratio;
        }

        floor = 1e-31 * sum;
    }

    /// <summary>Number of doubles of work space that a problem needs.</summary>
    public static int WorkLength(in FitProblem problem)
    {
        int unknowns = SizeOf(problem);
        return (unknowns + problem.Loads.Length) * (unknowns + 4);
    }

    /// <summary>Square of a step, in uncertainties, that is nothing but rounding.</summary>
    public double RoundingFloor => floor;

    public double SourceVolt => values[size - 2];

    public double Ohm => values[size - 1];

    public void Start(double sourceVolt, double ohm)
    {
        values.Clear();
        loadErrors.Clear();
        loadDiagonals.Fill(1);
        values[size - 2] = sourceVolt;
        values[size - 1] = ohm;
    }

    /// <summary>
    /// Forms the equations at the values of the moment.
    /// </summary>
    /// <returns>The objective; infinity where the values belong to no physical source.</returns>
    public double Linearise()
    {
        matrix.Clear();
        gradient.Clear();
        double objective = 0;
        for (int k = 0; k < size - 2; k++)
        {
            matrix[k * (size + 1)] = 1;
            gradient[k] = -values[k];
            objective += values[k] * values[k];
        }

        int load = -1;
        foreach (ref readonly FitPoint point in problem.Points)
        {
            if (point.Load != load)
            {
                load = point.Load;
                double prior = -loadErrors[load];
                objective += prior * prior;
                BeginLoad(load, prior);
            }

            SourceModel model = ModelAt(load);
            if (!model.IsPhysical)
            {
                return double.PositiveInfinity;
            }

            double weight = 1 / point.StandardUncertaintyVolt;
            double offset = returnTerm == 1 ? problem.OffsetUncertaintyVolt * values[0] : 0;
            double residual = (point.Volt - model.Volt - offset) * weight;
            objective += residual * residual;
            FillRow(model, load, weight);
            if (load >= 0)
            {
                Rotate(load, model.PerLoadOhm * problem.Loads[load].IndividualOhm * weight, ref residual);
            }

            Accumulate(residual);
        }

        return objective;
    }

    /// <summary>Solves for the step and takes it.</summary>
    /// <param name="decrement">What the linearised objective falls by: the squared step in uncertainties.</param>
    /// <returns>False where the equations are singular.</returns>
    public bool Step(out double decrement)
    {
        decrement = 0;
        if (!SmallCholesky.Factor(matrix, size))
        {
            return false;
        }

        SmallCholesky.SolveLower(matrix, size, gradient);
        foreach (double part in gradient)
        {
            decrement += part * part;
        }

        SmallCholesky.SolveUpper(matrix, size, gradient);
        gradient.CopyTo(steps);
        for (int load = 0; load < loadSteps.Length; load++)
        {
            double step = loadPulls[load];
            decrement += step * step;
            ReadOnlySpan<double> coupling = loadRows.Slice(load * size, size);
            for (int k = 0; k < size; k++)
            {
                step -= coupling[k] * steps[k];
            }

            loadSteps[load] = step / loadDiagonals[load];
        }

        AddScaled(values, steps, 1);
        AddScaled(loadErrors, loadSteps, 1);
        return double.IsFinite(decrement);
    }

    /// <summary>Takes half of the last step back.</summary>
    public void HalveStep()
    {
        AddScaled(values, steps, -0.5);
        AddScaled(steps, steps, -0.5);
        AddScaled(loadErrors, loadSteps, -0.5);
        AddScaled(loadSteps, loadSteps, -0.5);
    }

    /// <summary>Variances and covariance of Vth and resistance, from the factor's last corner.</summary>
    public (double Volt, double Ohm, double Both) Covariance()
    {
        int last = (size * size) - 1;
        double lower = matrix[last];
        double upper = matrix[last - size - 1];
        double corner = matrix[last - 1];
        double ratio = corner / (upper * lower);
        return ((1 / (upper * upper)) + (ratio * ratio), 1 / (lower * lower), -ratio / lower);
    }

    private static int SizeOf(in FitProblem problem) =>
        2 + problem.CommonCount + (problem.OffsetUncertaintyVolt > 0 ? 1 : 0) + (problem.ReturnUncertaintyVolt > 0 ? 1 : 0);

    private SourceModel ModelAt(int load)
    {
        double back = problem.ReturnVolt;
        if (problem.ReturnSharesOffset && returnTerm == 1)
        {
            back -= problem.OffsetUncertaintyVolt * values[0];
        }

        if (firstLoadTerm > returnTerm)
        {
            back += problem.ReturnUncertaintyVolt * values[returnTerm];
        }

        double siemens = 0;
        if (load >= 0)
        {
            FitLoad stated = problem.Loads[load];
            double ohm = stated.Ohm + (stated.IndividualOhm * loadErrors[load]);
            for (int k = 0; k < problem.CommonCount; k++)
            {
                ohm += problem.CommonOhm[(load * problem.CommonCount) + k] * values[firstLoadTerm + k];
            }

            siemens = 1 / ohm;
        }

        return new(values[size - 2], values[size - 1], back, siemens, problem.MeterSiemens);
    }

    private void FillRow(in SourceModel model, int load, double weight)
    {
        if (returnTerm == 1)
        {
            double shared = problem.ReturnSharesOffset ? model.PerReturnVolt : 0;
            row[0] = problem.OffsetUncertaintyVolt * (1 - shared) * weight;
        }

        if (firstLoadTerm > returnTerm)
        {
            row[returnTerm] = problem.ReturnUncertaintyVolt * model.PerReturnVolt * weight;
        }

        for (int k = 0; k < problem.CommonCount; k++)
        {
            double ohm = load < 0 ? 0 : problem.CommonOhm[(load * problem.CommonCount) + k];
            row[firstLoadTerm + k] = ohm * model.PerLoadOhm * weight;
        }

        row[size - 2] = model.PerSourceVolt * weight;
        row[size - 1] = model.PerOhm * weight;
    }

    private void Accumulate(double residual)
    {
        for (int i = 0; i < size; i++)
        {
            double factor = row[i];
            gradient[i] += factor * residual;
            AddScaled(matrix.Slice(i * size, i + 1), row, factor);
        }
    }

    private void BeginLoad(int load, double prior)
    {
        loadRows.Slice(load * size, size).Clear();
        loadDiagonals[load] = 1;
        loadPulls[load] = prior;
    }

    // Takes a load's own error out of the row at hand by rotating it into the load's row: for the load's first reading
    // that is its effective variance, without the cancellation that a complement of sums would have.
    private void Rotate(int load, double own, ref double residual)
    {
        double diagonal = loadDiagonals[load];
        double length = Math.Sqrt((diagonal * diagonal) + (own * own));
        double cosine = diagonal / length;
        double sine = own / length;
        Span<double> kept = loadRows.Slice(load * size, size);
        for (int k = 0; k < size; k++)
        {
            double above = kept[k];
            kept[k] = (cosine * above) + (sine * row[k]);
            row[k] = (cosine * row[k]) - (sine * above);
        }

        double pull = loadPulls[load];
        loadPulls[load] = (cosine * pull) + (sine * residual);
        residual = (cosine * residual) - (sine * pull);
        loadDiagonals[load] = length;
    }

    private static void AddScaled(Span<double> target, ReadOnlySpan<double> source, double factor)
    {
        for (int i = 0; i < target.Length; i++)
        {
            target[i] += factor * source[i];
        }
    }
}
