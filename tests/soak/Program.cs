using System.Text.Json;
using BenchRunner.Soak.Fuzz;
using BenchRunner.Soak.Mixes;
using FakeBench.Fixtures;

namespace BenchRunner.Soak;

/// <summary>The soak: <c>dotnet run -c Release --project tests/soak -- [--seed N] [--mixes M] [--json]</c>.</summary>
internal static class Program
{
    private const int WrongInput = 2;

    // Each simulation is one thread; two of them share this computer's two cores.
    private const int Lanes = 2;
    private const int KeptTrains = 48;

    private static readonly JsonSerializerOptions _form = new(JsonSerializerDefaults.Web) { WriteIndented = true };

    private static int Main(string[] arguments)
    {
        if (Options.Read(arguments) is not { } options)
        {
            Console.Error.WriteLine(Options.Usage);
            return WrongInput;
        }

        if (options.Fuzz)
        {
            return Fuzzed(options);
        }

        string parent = Directory.CreateTempSubdirectory("soak-").FullName;
        try
        {
            // Whatever the program makes of temporary files, it makes there.
            Environment.SetEnvironmentVariable("TMPDIR", parent);
            return Conclude(options, Mixed(options, parent), Console.Out);
        }
        finally
        {
            Directory.Delete(parent, recursive: true);
        }
    }

    /// <summary>Prints the result.</summary>
    /// <returns>The exit code: 0 only without failures.</returns>
    internal static int Conclude(Options options, IEnumerable<Failure> failures, TextWriter output)
    {
        Failure[] sorted = [.. failures.OrderBy(failure => failure.Seed)];
        output.WriteLine(options.Json
            ? JsonSerializer.Serialize(new { mixes = options.Mixes, failures = sorted }, _form)
            : $"{options.Mixes} mixes, {sorted.Length} failures");
        return sorted.Length == 0 ? 0 : 1;
    }

    private static List<Failure> Mixed(Options options, string parent)
    {
        List<Failure> failures = [];
        Tell(Trial.Run(Choose(options, 0), new TrainCache(KeptTrains), parent), options, failures);
        var leaks = new Leaks(parent);
        int next = 1;
        Parallel.For(0, Math.Min(Lanes, options.Mixes), _ =>
        {
            var trains = new TrainCache(KeptTrains);
            while (Interlocked.Increment(ref next) is var number && number <= options.Mixes)
            {
                Judged judged = Trial.Run(Choose(options, (ulong)number - 1), trains, parent);
                lock (failures)
                {
                    Tell(judged, options, failures);
                }
            }
        });
        foreach (string what in leaks.Found())
        {
            (options.Json ? Console.Error : Console.Out).WriteLine($"all mixes: {what}");
            failures.Add(new Failure(options.Seed, $"all mixes: {what}"));
        }

        return failures;
    }

    private static int Fuzzed(Options options)
    {
        IReadOnlyList<string> failures = FuzzRun.Run(
            options.Seed, FuzzRun.ParserMessages, FuzzRun.SocketMessages, options.Json ? Console.Error : Console.Out);
        if (options.Json)
        {
            Console.Out.WriteLine(JsonSerializer.Serialize(
                new { parsed = FuzzRun.ParserMessages, over_socket = FuzzRun.SocketMessages, failures }, _form));
        }

        return failures.Count == 0 ? 0 : 1;
    }

    private static Mix Choose(Options options, ulong number)
    {
        Mix mix = Mix.Of(options.Seed + number);
        return options.Faults.Count == 0 ? mix : mix.Under(options.Faults);
    }

    private static void Tell(Judged judged, Options options, List<Failure> failures)
    {
        TextWriter where = options.Json ? Console.Error : Console.Out;
        if (options.Log)
        {
            foreach (string line in (IEnumerable<string>)[judged.Mix.ToString(), .. judged.Log])
            {
                where.WriteLine(line);
            }
        }

        if (judged.Wrong.Length > 0)
        {
            failures.Add(new Failure(judged.Mix.Seed, judged.Wrong));
            where.WriteLine($"{judged.Mix}\n  {judged.Wrong}");
            where.WriteLine(FormattableString.Invariant($"  replay: --seed {judged.Mix.Seed} --mixes 1 --log"));
        }
    }
}
