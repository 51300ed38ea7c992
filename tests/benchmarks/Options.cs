using System.Globalization;

namespace BenchRunner.Benchmarks;

/// <summary>What was asked for on the command line.</summary>
/// <param name="Chosen">Groups and works; empty: all.</param>
/// <param name="Seed">Seed of every draw.</param>
/// <param name="Json">Whether the table is written as JSON.</param>
/// <param name="List">Whether rows are listed, not measured.</param>
internal sealed record Options(IReadOnlyList<string> Chosen, int Seed, bool Json, bool List)
{
    /// <summary>Whether a work is asked for, by its own name or its group's.</summary>
    public bool Wants(Goal goal) => Chosen.Count == 0 || Chosen.Contains(goal.Group) || Chosen.Contains(goal.Work);

    /// <summary>Reads the command line; null where it cannot be read.</summary>
    public static Options? Read(string[] arguments, List<Goal> goals)
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
                case var name when goals.Exists(goal => goal.Group == name || goal.Work == name):
                    chosen.Add(name);
                    break;
                default:
                    return null;
            }
        }

        return new Options(chosen, seed, json, list);
    }
}
