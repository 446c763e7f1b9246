namespace ImpedanceScreen.Files;

/// <summary>Finds the name that a misspelt one was probably meant to be.</summary>
public static class Nearest
{
    /// <summary>
    /// The known name with the smallest edit distance (insert, delete, replace, swap of neighbours); null where none is
    /// nearer than about a third of the word.
    /// </summary>
    /// <param name="written">What was written.</param>
    /// <param name="known">The names that would be right.</param>
    public static string? To(string written, IEnumerable<string> known)
    {
        ArgumentNullException.ThrowIfNull(written);
        ArgumentNullException.ThrowIfNull(known);
        string? best = null;
        int bestDistance = int.MaxValue;
        foreach (string name in known.Where(name => Math.Abs(name.Length - written.Length) <= Allowed(name)))
        {
            int distance = Distance(written, name);
            if (distance < bestDistance && distance <= Allowed(name))
            {
                (best, bestDistance) = (name, distance);
            }
        }

        return best;
    }

    private static int Allowed(string name) => Math.Max(1, name.Length / 3);

    // Optimal string alignment distance; three rows suffice.
    private static int Distance(string from, string to)
    {
        int[] beforeLast = new int[to.Length + 1];
        int[] last = [.. Enumerable.Range(0, to.Length + 1)];
        int[] row = new int[to.Length + 1];
        for (int i = 1; i <= from.Length; i++)
        {
            row[0] = i;
            for (int j = 1; j <= to.Length; j++)
            {
                int cost = Same(from[i - 1], to[j - 1]) ? 0 : 1;
                row[j] = Math.Min(Math.Min(last[j] + 1, row[j - 1] + 1), last[j - 1] + cost);
                if (i > 1 && j > 1 && Same(from[i - 1], to[j - 2]) && Same(from[i - 2], to[j - 1]))
                {
                    row[j] = Math.Min(row[j], beforeLast[j - 2] + 1);
                }
            }

            (beforeLast, last, row) = (last, row, beforeLast);
        }

        return last[to.Length];
    }

    private static bool Same(char one, char other) => char.ToLowerInvariant(one) == char.ToLowerInvariant(other);
}
