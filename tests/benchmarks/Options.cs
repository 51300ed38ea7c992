using System.Globalization;

namespace BenchRunner.Benchmarks;

/// <summary>What was asked for on the command line.</summary>
/// <param name="Groups">Groups; empty: all.</param>
/// <param name="Seed">Seed of every draw.</param>
/// <param name="Json">Whether the table is written as JSON.</param>
/// <param name="List">Whether rows are listed, not measured.</param>
internal sealed record Options(IReadOnlyList<string> Groups, int Seed, bool Json, bool List)
{
    /// <summary>Whether a group is asked for.</summary>
    public bool Wants(string group) => Groups.Count == 0 || Groups.Contains(group);

    /// <summary>Reads the command line; null where it cannot be read.</summary>
    public static Options? Read(string[] arguments, string[] groups)
    {
        List<string> chosen = [];
        (int seed, bool json, bool list) = (1, false, false);
        for (int i = 0; i < arguments.Length; i++)
        {
            switch (arguments[i])
            {
                case "--json":
                    json = true;
                    break;
                case "--list":
                    list = true;
                    break;
                case "--seed" when i + 1 < arguments.Length
                    && int.TryParse(arguments[i + 1], CultureInfo.InvariantCulture, out seed):
                    i++;
                    break;
                case var group when groups.Contains(group):
                    chosen.Add(group);
                    break;
                default:
                    return null;
            }
        }

        return new Options(chosen, seed, json, list);
    }
}
