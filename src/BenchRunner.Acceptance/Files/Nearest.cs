namespace BenchRunner.Acceptance.Files;

/// <summary>The known word that a misspelt one is nearest to.</summary>
internal static class Nearest
{
    /// <summary>Finds the nearest word.</summary>
    /// <param name="word">What was written.</param>
    /// <param name="known">The known words.</param>
    /// <returns>
    /// The nearest; of several one with the same first letter, which people rarely miss; null where none is near: more
    /// than a third of its letters differ.
    /// </returns>
    public static string? To(string word, IEnumerable<string> known)
    {
        if (word.Length == 0)
        {
            return null;
        }

        string? best = null;
        int least = int.MaxValue;
        foreach (string candidate in known)
        {
            int bound = Math.Max(1, candidate.Length / 3);
            if (Math.Abs(candidate.Length - word.Length) > bound)
            {
                continue;
            }

            int distance = Distance(word.ToLowerInvariant().Replace('_', '-'), candidate.Replace('_', '-'));
            int rank = 2 * distance + (word[..1] == candidate[..1] ? 0 : 1);
            if (distance <= bound && rank < least)
            {
                least = rank;
                best = candidate;
            }
        }

        return best;
    }

    /// <summary>Edits (insert, remove, replace, swap of neighbours) that make one word of the other.</summary>
    private static int Distance(string a, string b)
    {
        var rows = new int[a.Length + 1, b.Length + 1];
        for (int i = 0; i <= a.Length; i++)
        {
            rows[i, 0] = i;
        }

        for (int j = 0; j <= b.Length; j++)
        {
            rows[0, j] = j;
        }

        for (int i = 1; i <= a.Length; i++)
        {
            for (int j = 1; j <= b.Length; j++)
            {
                int replace = rows[i - 1, j - 1] + (a[i - 1] == b[j - 1] ? 0 : 1);
                int least = Math.Min(replace, Math.Min(rows[i - 1, j], rows[i, j - 1]) + 1);
                bool swapped = i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1];
                rows[i, j] = swapped ? Math.Min(least, rows[i - 2, j - 2] + 1) : least;
            }
        }

        return rows[a.Length, b.Length];
    }
}
