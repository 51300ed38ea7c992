using System.Globalization;
using FakeBench.Faults;

namespace BenchRunner.Soak;

/// <summary>What the command line says.</summary>
/// <param name="Seed">Seed of the first mix; each further one has the next.</param>
/// <param name="Mixes">How many mixes are tried.</param>
/// <param name="Json">Whether the result is printed as JSON.</param>
/// <param name="Log">Whether each mix's event log is printed.</param>
/// <param name="Faults">Faults tried instead of those of the seeds, on a sound device; empty: those of the
/// seeds.</param>
/// <param name="Fuzz">Whether replies are fuzzed in place of mixes.</param>
internal sealed record Options(
    ulong Seed, int Mixes, bool Json, bool Log, IReadOnlyList<Fault> Faults, bool Fuzz = false)
{
    /// <summary>How it is called.</summary>
    public const string Usage =
        "usage: [--seed N] [--mixes M] [--json] [--log] [--fault NAME[@WHEN]]… | --fuzz [--seed N] [--json]";

    /// <summary>Reads the command line.</summary>
    /// <returns>The options; null where it is none.</returns>
    public static Options? Read(IReadOnlyList<string> arguments)
    {
        var options = new Options(1, 2000, Json: false, Log: false, []);
        for (int i = 0; i < arguments.Count; i++)
        {
            switch (arguments[i])
            {
                case "--json":
                    options = options with { Json = true };
                    break;
                case "--fuzz":
                    options = options with { Fuzz = true };
                    break;
                case "--fault" when i + 1 < arguments.Count:
                    options = options with { Faults = [.. options.Faults, Fault.Parse(arguments[++i])] };
                    break;
                case "--log":
                    options = options with { Log = true };
                    break;
                case "--seed" when i + 1 < arguments.Count && ulong.TryParse(
                    arguments[i + 1], NumberStyles.None, CultureInfo.InvariantCulture, out ulong seed):
                    options = options with { Seed = seed };
                    i++;
                    break;
                case "--mixes" when i + 1 < arguments.Count && int.TryParse(
                    arguments[i + 1], NumberStyles.None, CultureInfo.InvariantCulture, out int mixes) && mixes > 0:
                    options = options with { Mixes = mixes };
                    i++;
                    break;
                default:
                    return null;
            }
        }

        return options;
    }
}
