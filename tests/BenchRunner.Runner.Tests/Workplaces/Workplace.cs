using System.Globalization;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Runner.Sessions;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Runner.Tests.Workplaces;

/// <summary>A folder of a test's own: sequence, bench and evidence in it, the shipped dialects beside.</summary>
internal sealed class Workplace : IDisposable
{
    public const string Device = "W1200-0001";

    private const string Lead = """
        format: 1
        sequence: short
        revision: 1
        part: WD-1200S-25
        kind: mosfet
        position: both
        ratings: { blocking-voltage: 1200 V, peak-current: 160 A, gate: [-8 V, 22 V], junction-max: 175 degC }
        thermal-impedance: { 10 us: 0.004 K/W, 1 ms: 0.03 K/W, steady: 0.45 K/W }
        expected: { fastest-edge: 10 ns, ring-frequency: 42 MHz, on-voltage: 1.1 V, forward-voltage: 3 V }
        operating-points:

        """;

    private readonly DirectoryInfo _folder = Directory.CreateTempSubdirectory("benchrunner-");

    public string Evidence => File("evidence.db");

    public string BenchFile => File("bench.yaml");

    public string File(string name) => Path.Combine(_folder.FullName, name);

    /// <summary>A sequence of one point (400 V, 20 A) or two (600 V, 40 A) whose captures follow quickly.</summary>
    /// <param name="rest">Captures, validity, limits.</param>
    /// <param name="points">1 or 2.</param>
    public Sequence Sequence(string rest, int points = 1)
    {
        string text = Lead
            + string.Concat(((string[])[Point("half", "400 V", "20 A"), Point("rated", "600 V", "40 A")]).Take(points))
            + rest + "\n";
        string path = File("sequence.yaml");
        System.IO.File.WriteAllText(path, text);
        return Value(SequenceFile.Read(path));
    }

    /// <summary>The shipped bench with lines changed.</summary>
    public Bench Bench(params (string Old, string New)[] edits)
    {
        string text = System.IO.File.ReadAllText(Repository("sequences", "benches", "fake.yaml"));
        foreach ((string old, string replacement) in edits)
        {
            Assert.Contains(old, text, StringComparison.Ordinal);
            text = text.Replace(old, replacement, StringComparison.Ordinal);
        }

        System.IO.File.WriteAllText(BenchFile, text);
        return Value(Acceptance.Benches.BenchFile.Read(BenchFile));
    }

    /// <summary>A bench of instruments that run already: no <c>fake:</c> block, so it has a lock and a latch.</summary>
    public Bench OtherBench(IReadOnlyDictionary<string, string> links, string exchange = "none")
    {
        (string, string) Link(string role, string shipped) =>
            ($"  {role}: {{ link: '{shipped}'", $"  {role}: {{ link: '{links[role]}'");
        return Bench(
            ("fake: { seed: 1, pace: 5 }\n", ""),
            ("exchange: none", $"exchange: {exchange}"),
            Link("supply", "tcp 127.0.0.1:0"),
            Link("pulser", "tcp 127.0.0.1:0"),
            Link("scope", "tcp 127.0.0.1:0"),
            Link("voltmeter", "tcp 127.0.0.1:0"),
            Link("interlock", "serial auto"));
    }

    public static IReadOnlyDictionary<string, DialectFile> Dialects(Bench bench) => bench.Roles.ToDictionary(
        role => role.Value.Dialect,
        role => Value(DialectReader.Read(Repository("sequences", "dialects", role.Value.Dialect + ".yaml"))));

    /// <summary>The shipped dialects of a bench, the scope's without one of its operations.</summary>
    public IReadOnlyDictionary<string, DialectFile> DialectsWithout(Bench bench, string operation)
    {
        string scope = bench.Roles["scope"].Dialect;
        string path = File(scope + ".yaml");
        System.IO.File.WriteAllLines(
            path,
            System.IO.File.ReadLines(Repository("sequences", "dialects", scope + ".yaml"))
                .Where(line => !line.StartsWith($"  {operation}:", StringComparison.Ordinal)));
        return new Dictionary<string, DialectFile>(Dialects(bench)) { [scope] = Value(DialectReader.Read(path)) };
    }

    public RunRequest Request(Sequence sequence, Bench bench)
    {
        Planned planned = Planner.Plan(sequence, bench);
        Assert.Empty(planned.Refusals.Select(refusal => refusal.ToString()));
        return new RunRequest
        {
            Plan = planned.Plan!,
            Dialects = Dialects(bench),
            EvidencePath = Evidence,
            Operator = "A. Person",
        };
    }

    /// <summary>Runs a device as <c>run</c> does.</summary>
    public async Task<RunSummary> Run(Sequence sequence, Bench bench, RecordingSink heard, string device = Device) =>
        await new RunSession(Request(sequence, bench), heard, new Person("simulated"), TimeProvider.System)
        {
            Guardian = LivingGuardian.Start,
        }
            .Run(new Serials(device), TestContext.Current.CancellationToken);

    /// <summary>One value of the evidence.</summary>
    public T Ask<T>(string sql)
    {
        using var connection = new SqliteConnection($"Data Source={Evidence};Mode=ReadOnly;Pooling=False");
        connection.Open();
        using SqliteCommand command = connection.CreateCommand();
#pragma warning disable CA2100 // The tests' own SQL.
        command.CommandText = sql;
#pragma warning restore CA2100
        return (T)Convert.ChangeType(command.ExecuteScalar()!, typeof(T), CultureInfo.InvariantCulture);
    }

    public void Dispose() => _folder.Delete(recursive: true);

    private static string Point(string name, string voltage, string current) => $$"""
          - name: {{name}}
            bus-voltage: {{voltage}}
            load-current: {{current}}
            temperature: ambient
            gate: { on: 18 V, off: -4 V, resistance-on: 4.7 Ohm, resistance-off: 2.2 Ohm }
            pulses: { gap: 6 us, second: 3 us, repeat-every: 50 ms }

        """;

    public static T Value<T>(Read<T> read)
        where T : class
    {
        Assert.Empty(read.Problems.Select(problem => problem.ToString()));
        return read.Value!;
    }

    public static string Repository(params string[] parts)
    {
        DirectoryInfo? folder = new(AppContext.BaseDirectory);
        while (folder is not null && !System.IO.File.Exists(Path.Combine(folder.FullName, "BenchRunner.sln")))
        {
            folder = folder.Parent;
        }

        return Path.Combine([folder?.FullName ?? throw new DirectoryNotFoundException("BenchRunner.sln"), .. parts]);
    }
}
