using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// Operations on rows of equations, four values at a time; rows are padded with zeros to whole vectors.
/// </summary>
internal static class Rows
{
    /// <summary>Length of a row that holds so many values.</summary>
    public static int Padded(int length) => (length + 3) & ~3;

    /// <summary>target += factor * source; both have the same whole number of vectors.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static void AddScaled(Span<double> target, ReadOnlySpan<double> source, double factor)
    {
        if (source.Length != target.Length)
        {
            throw new ArgumentException("Rows are of one length.", nameof(source));
        }

        ref double to = ref MemoryMarshal.GetReference(target);
        ref double from = ref MemoryMarshal.GetReference(source);
        for (nuint i = 0; i < (nuint)target.Length; i += 4)
        {
            Vector256<double> sum = Vector256.LoadUnsafe(ref to, i) + (factor * Vector256.LoadUnsafe(ref from, i));
            sum.StoreUnsafe(ref to, i);
        }
    }

    /// <summary>Rotates two rows: (kept, row) becomes (c kept + s row, c row - s kept).</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static void Rotate(Span<double> kept, Span<double> row, double cosine, double sine)
    {
        if (row.Length != kept.Length)
        {
            throw new ArgumentException("Rows are of one length.", nameof(row));
        }

        ref double above = ref MemoryMarshal.GetReference(kept);
        ref double below = ref MemoryMarshal.GetReference(row);
        for (nuint i = 0; i < (nuint)kept.Length; i += 4)
        {
            Vector256<double> a = Vector256.LoadUnsafe(ref above, i);
            Vector256<double> b = Vector256.LoadUnsafe(ref below, i);
            ((cosine * a) + (sine * b)).StoreUnsafe(ref above, i);
            ((cosine * b) - (sine * a)).StoreUnsafe(ref below, i);
        }
    }

    /// <summary>matrix += row rowᵀ, the first <paramref name="size"/> rows of it.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static void AddSquare(Span<double> matrix, ReadOnlySpan<double> row, int size)
    {
        if (matrix.Length < size * row.Length)
        {
            throw new ArgumentException("The matrix has a row for each value.", nameof(matrix));
        }

        ref double to = ref MemoryMarshal.GetReference(matrix);
        ref double from = ref MemoryMarshal.GetReference(row);
        nuint at = 0;
        for (int i = 0; i < size; i++)
        {
            double factor = row[i];
            for (nuint k = 0; k < (nuint)row.Length; k += 4, at += 4)
            {
                Vector256<double> sum = Vector256.LoadUnsafe(ref to, at) + (factor * Vector256.LoadUnsafe(ref from, k));
                sum.StoreUnsafe(ref to, at);
            }
        }
    }
}
