using System.Runtime.CompilerServices;

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
    private readonly int width;
    private readonly int firstLoadTerm;
    private readonly int returnTerm;
    private readonly double floor;
    private readonly Span<double> weights;
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
        width = Rows.Padded(size);
        returnTerm = problem.OffsetUncertaintyVolt > 0 ? 1 : 0;
        firstLoadTerm = returnTerm + (problem.ReturnUncertaintyVolt > 0 ? 1 : 0);
        int loads = problem.Loads.Length;
        int loadWidth = Rows.Padded(loads);
        gradient = work[..width];
        row = work.Slice(width, width);
        values = work.Slice(2 * width, width);
        steps = work.Slice(3 * width, width);
        work = work[(4 * width)..];
        loadErrors = work[..loadWidth];
        loadSteps = work.Slice(loadWidth, loadWidth);
        loadPulls = work.Slice(2 * loadWidth, loadWidth);
        loadDiagonals = work.Slice(3 * loadWidth, loadWidth);
        work = work[(4 * loadWidth)..];
        matrix = work[..(size * width)];
        loadRows = work.Slice(size * width, loads * width);
        weights = work.Slice((size + loads) * width, problem.Points.Length);
        double sum = 0;
        for (int i = 0; i < weights.Length; i++)
        {
            weights[i] = 1 / problem.Points[i].StandardUncertaintyVolt;
            double ratio = problem.Points[i].Volt * weights[i];
            sum += ratio * ratio;
        }

        floor = 1e-31 * sum;
    }

    /// <summary>Number of doubles of work space that a problem needs.</summary>
    public static int WorkLength(in FitProblem problem)
    {
        int unknowns = SizeOf(problem);
        int loads = problem.Loads.Length;
        return (Rows.Padded(unknowns) * (4 + unknowns + loads)) + (4 * Rows.Padded(loads)) + problem.Points.Length;
    }

    /// <summary>Square of a step, in uncertainties, that is nothing but rounding.</summary>
    public double RoundingFloor => floor;

    public double SourceVolt => values[size - 2];

    public double Ohm => values[size - 1];

    /// <summary>Starts from the line of the readings against load current.</summary>
    public void Start()
    {
        (double sourceVolt, double ohm) = StartLine.Fit(problem, weights);
        Start(sourceVolt, ohm);
    }

    /// <summary>Starts from given values, all loads and common terms as stated.</summary>
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
            matrix[k * (width + 1)] = 1;
            gradient[k] = -values[k];
            objective += values[k] * values[k];
        }

        // Copies on the stack: the compiler cannot know that what is written below leaves the fields alone.
        ReadOnlySpan<FitPoint> points = problem.Points;
        ReadOnlySpan<FitLoad> loads = problem.Loads;
        ReadOnlySpan<double> weight = weights;
        Span<double> equation = row;
        double offset = returnTerm == 1 ? problem.OffsetUncertaintyVolt * values[0] : 0;
        double back = Return(offset);
        double sourceVolt = SourceVolt;
        double ohm = Ohm;
        double meter = problem.MeterSiemens;
        int load = -1;
        double siemens = 0;
        for (int i = 0; i < points.Length && i < weight.Length; i++)
        {
            FitPoint point = points[i];
            if (point.Load != load)
            {
                load = point.Load;
                siemens = 1 / LoadOhm(load, loads[load]);
                double prior = -loadErrors[load];
                objective += prior * prior;
                BeginLoad(load, prior);
            }

            var model = new SourceModel(sourceVolt, ohm, back, siemens, meter);
            if (!model.IsPhysical)
            {
                return double.PositiveInfinity;
            }

            double residual = (point.Volt - model.Volt - offset) * weight[i];
            objective += residual * residual;
            FillRow(equation, model, load, weight[i]);
            if (load >= 0)
            {
                Rotate(load, model.PerLoadOhm * loads[load].IndividualOhm * weight[i], equation, ref residual);
            }

            Rows.AddSquare(matrix, equation, size);
            Rows.AddScaled(gradient, equation, residual);
        }

        return objective;
    }

    /// <summary>Solves for the step and takes it.</summary>
    /// <param name="decrement">What the linearised objective falls by: the squared step in uncertainties.</param>
    /// <returns>False where the equations are singular.</returns>
    public bool Step(out double decrement)
    {
        decrement = 0;
        if (!SmallCholesky.Factor(matrix, size, width))
        {
            return false;
        }

        SmallCholesky.SolveLower(matrix, size, width, gradient);
        foreach (double part in gradient)
        {
            decrement += part * part;
        }

        SmallCholesky.SolveUpper(matrix, size, width, gradient);
        gradient.CopyTo(steps);
        for (int load = 0; load < problem.Loads.Length; load++)
        {
            double step = loadPulls[load];
            decrement += step * step;
            ReadOnlySpan<double> coupling = loadRows.Slice(load * width, width);
            for (int k = 0; k < size; k++)
            {
                step -= coupling[k] * steps[k];
            }

            loadSteps[load] = step / loadDiagonals[load];
        }

        Rows.AddScaled(values, steps, 1);
        Rows.AddScaled(loadErrors, loadSteps, 1);
        return double.IsFinite(decrement);
    }

    /// <summary>Takes half of the last step back.</summary>
    public void HalveStep()
    {
        Rows.AddScaled(values, steps, -0.5);
        Rows.AddScaled(steps, steps, -0.5);
        Rows.AddScaled(loadErrors, loadSteps, -0.5);
        Rows.AddScaled(loadSteps, loadSteps, -0.5);
    }

    /// <summary>Variances and covariance of Vth and resistance, from the factor's last corner.</summary>
    public (double Volt, double Ohm, double Both) Covariance()
    {
        int last = ((size - 1) * width) + size - 1;
        double lower = matrix[last];
        double upper = matrix[last - width - 1];
        double corner = matrix[last - 1];
        double ratio = corner / (upper * lower);
        return ((1 / (upper * upper)) + (ratio * ratio), 1 / (lower * lower), -ratio / lower);
    }

    private static int SizeOf(in FitProblem problem) =>
        2 + problem.CommonCount + (problem.OffsetUncertaintyVolt > 0 ? 1 : 0)
            + (problem.ReturnUncertaintyVolt > 0 ? 1 : 0);

    private double Return(double offset)
    {
        double shared = problem.ReturnSharesOffset ? offset : 0;
        double own = firstLoadTerm > returnTerm ? problem.ReturnUncertaintyVolt * values[returnTerm] : 0;
        return problem.ReturnVolt - shared + own;
    }

    private double LoadOhm(int load, in FitLoad stated)
    {
        double ohm = stated.Ohm + (stated.IndividualOhm * loadErrors[load]);
        int count = problem.CommonCount;
        ReadOnlySpan<double> common = problem.CommonOhm.Slice(load * count, count);
        ReadOnlySpan<double> errors = values.Slice(firstLoadTerm, count);
        for (int k = 0; k < common.Length && k < errors.Length; k++)
        {
            ohm += common[k] * errors[k];
        }

        return ohm;
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private void FillRow(Span<double> equation, in SourceModel model, int load, double weight)
    {
        if (returnTerm == 1)
        {
            double shared = problem.ReturnSharesOffset ? model.PerReturnVolt : 0;
            equation[0] = problem.OffsetUncertaintyVolt * (1 - shared) * weight;
        }

        if (firstLoadTerm > returnTerm)
        {
            equation[returnTerm] = problem.ReturnUncertaintyVolt * model.PerReturnVolt * weight;
        }

        int count = problem.CommonCount;
        if (load < 0)
        {
            equation.Slice(firstLoadTerm, count).Clear();
        }
        else
        {
            ReadOnlySpan<double> common = problem.CommonOhm.Slice(load * count, count);
            double perOhm = model.PerLoadOhm * weight;
            for (int k = 0; k < common.Length; k++)
            {
                equation[firstLoadTerm + k] = common[k] * perOhm;
            }
        }

        equation[size - 2] = model.PerSourceVolt * weight;
        equation[size - 1] = model.PerOhm * weight;
    }

    private void BeginLoad(int load, double prior)
    {
        loadRows.Slice(load * width, width).Clear();
        loadDiagonals[load] = 1;
        loadPulls[load] = prior;
    }

    // Takes a load's own error out of the row at hand by rotating it into the load's row: for the load's first reading
    // that is its effective variance, without the cancellation that a complement of sums would have.
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private void Rotate(int load, double own, Span<double> equation, ref double residual)
    {
        double diagonal = loadDiagonals[load];
        double length = Math.Sqrt((diagonal * diagonal) + (own * own));
        double inverse = 1 / length;
        double cosine = diagonal * inverse;
        double sine = own * inverse;
        Span<double> kept = loadRows.Slice(load * width, width);
        Rows.Rotate(kept, equation, cosine, sine);
        double pull = loadPulls[load];
        loadPulls[load] = (cosine * pull) + (sine * residual);
        residual = (cosine * residual) - (sine * pull);
        loadDiagonals[load] = length;
    }
}
