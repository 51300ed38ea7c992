using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Soak.Mixes;

/// <summary>The shipped files, made smaller, with a bench that is no fake one: so that its lock and latch are
/// real.</summary>
internal static class Files
{
    private static readonly string _shipped = Path.Combine(AppContext.BaseDirectory, "sequences");

    /// <summary>Dialects by name.</summary>
    public static IReadOnlyDictionary<string, DialectFile> Dialects { get; } =
        Directory.GetFiles(Path.Combine(_shipped, "dialects"))
            .Select(file => Value(DialectReader.Read(file))).ToDictionary(dialect => dialect.Name);

    /// <summary>Plans a mix in a folder.</summary>
    public static Plan Plan(Mix mix, string folder)
    {
        string bench = Path.Combine(folder, "bench.yaml");
        File.WriteAllLines(bench, BenchLines());
        string sequence = Path.Combine(folder, "sequence.yaml");
        File.WriteAllLines(sequence, SequenceLines(mix));
        Planned planned = Planner.Plan(Value(SequenceFile.Read(sequence)), Value(BenchFile.Read(bench)));
        return planned is { Plan: { } plan, Refusals.Count: 0 }
            ? plan : throw new InvalidOperationException(string.Join('\n', planned.Refusals));
    }

    private static IEnumerable<string> BenchLines()
    {
        foreach (string line in File.ReadLines(Path.Combine(_shipped, "benches", "fake.yaml")))
        {
            string role = line.Split(':')[0].Trim();

            // In virtual time nothing holds the instruments up: the bounds are the default ones.
            if (role is not ("fake" or "safety"))
            {
                yield return line
                    .Replace("'tcp 127.0.0.1:0'", $"'tcp {role} 1'", StringComparison.Ordinal)
                    .Replace("'serial auto'", $"'tcp {role} 1'", StringComparison.Ordinal);
            }
        }
    }

    private static IEnumerable<string> SequenceLines(Mix mix)
    {
        bool isOther = false;
        foreach (string line in File.ReadLines(Path.Combine(_shipped, "winch-drive-incoming.yaml")))
        {
            isOther = line.StartsWith("  - name: ", StringComparison.Ordinal)
                ? !mix.Points.Contains(line["  - name: ".Length..])
                : isOther && line.StartsWith("    ", StringComparison.Ordinal);
            bool isLimit = line.Contains(" at: ", StringComparison.Ordinal);
            bool isOfPoint = mix.Points.Any(point => line.Contains($" at: {point},", StringComparison.Ordinal));
            if (!isOther && (!isLimit || isOfPoint))
            {
                yield return line.Replace(
                    "valid: 5, at-most: 20", $"valid: {mix.Captures.Valid}, at-most: {mix.Captures.AtMost}",
                    StringComparison.Ordinal);
            }
        }
    }

    private static T Value<T>(Read<T> read)
        where T : class =>
        read.Value ?? throw new InvalidOperationException(string.Join('\n', read.Problems));
}
