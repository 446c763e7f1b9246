namespace ImpedanceScreen.Estimation;

/// <summary>
/// Cholesky factor of a small symmetric matrix, row by row in a span (rows may be wider than the matrix); only the
/// lower triangle is used.
/// </summary>
internal static class SmallCholesky
{
    /// <summary>
    /// A pivot below this part of its diagonal is rounding: the matrix is singular as far as it is known.
    /// </summary>
    private const double Rounding = 1e-14;

    /// <summary>Replaces the lower triangle by its factor L.</summary>
    /// <returns>False where the matrix is not positive definite.</returns>
    public static bool Factor(Span<double> matrix, int size, int width)
    {
        for (int i = 0; i < size; i++)
        {
            Span<double> row = matrix.Slice(i * width, i + 1);
            double diagonal = row[i];
            for (int j = 0; j < i; j++)
            {
                ReadOnlySpan<double> above = matrix.Slice(j * width, j + 1);
                double sum = row[j];
                for (int k = 0; k < j; k++)
                {
                    sum -= row[k] * above[k];
                }

                row[j] = sum / above[j];
            }

            double pivot = diagonal;
            for (int k = 0; k < i; k++)
            {
                pivot -= row[k] * row[k];
            }

            if (!(pivot > Rounding * diagonal))
            {
                return false;
            }

            row[i] = Math.Sqrt(pivot);
        }

        return true;
    }

    /// <summary>Replaces x by L⁻¹ x.</summary>
    public static void SolveLower(ReadOnlySpan<double> factor, int size, int width, Span<double> x)
    {
        for (int i = 0; i < size; i++)
        {
            double sum = x[i];
            for (int k = 0; k < i; k++)
            {
                sum -= factor[(i * width) + k] * x[k];
            }

            x[i] = sum / factor[(i * width) + i];
        }
    }

    /// <summary>Replaces x by L⁻ᵀ x.</summary>
    public static void SolveUpper(ReadOnlySpan<double> factor, int size, int width, Span<double> x)
    {
        for (int i = size - 1; i >= 0; i--)
        {
            double sum = x[i];
            for (int k = i + 1; k < size; k++)
            {
                sum -= factor[(k * width) + i] * x[k];
            }

            x[i] = sum / factor[(i * width) + i];
        }
    }
}
