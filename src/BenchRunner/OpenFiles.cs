using System.Globalization;

namespace BenchRunner;

/// <summary>How many files and links this process may have open.</summary>
internal static class OpenFiles
{
    /// <summary>A run on a bench of six instruments has about 150 open, the runtime's own among them.</summary>
    private const int Least = 256;

    private const string Limits = "/proc/self/limits";
    private const string Line = "Max open files";

    /// <summary>Why they are too few; null where they are not, or where the system does not tell.</summary>
    /// <remarks>Asked for before anything else is loaded: where they run out, not even a message can be relied on.</remarks>
    public static string? WhyTooFew()
    {
        if (!File.Exists(Limits))
        {
            return null;
        }

        foreach (string line in File.ReadLines(Limits))
        {
            if (line.StartsWith(Line, StringComparison.Ordinal)
                && line[Line.Length..].Split(' ', StringSplitOptions.RemoveEmptyEntries) is [{ } soft, ..]
                && int.TryParse(soft, NumberStyles.None, CultureInfo.InvariantCulture, out int limit)
                && limit < Least)
            {
                return $"this process may have {limit} files open, expected are {Least} at least; raise it with 'ulimit -n "
                    + $"{Least}'; nothing was touched";
            }
        }

        return null;
    }
}
