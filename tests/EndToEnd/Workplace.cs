using System.Diagnostics;
using Microsoft.Data.Sqlite;

namespace EndToEnd;

/// <summary>A folder of a test's own in which the built program runs as a user would run it.</summary>
internal sealed class Workplace : IDisposable
{
    private OrdinaryUser? _user;
    private TimeSpan _patience = TimeSpan.FromSeconds(120);
    private readonly DirectoryInfo _folder = Directory.CreateTempSubdirectory("benchrunner-");

    public string Folder => _folder.FullName;

    public string Evidence => Path("simulated-evidence.db");

    public static string Program { get; } = Built("BenchRunner", "benchrunner");

    public static string FakeBench { get; } = Built("FakeBench", "FakeBench");

    public static string Sequence { get; } = Repository("sequences", "winch-drive-incoming.yaml");

    public static string Repository(params string[] parts) => System.IO.Path.Combine([Root(), .. parts]);

    /// <summary>Lets processes run longer than a single device needs.</summary>
    public Workplace WithPatience(TimeSpan patience)
    {
        _patience = patience;
        return this;
    }

    /// <summary>Has everything run as an ordinary user, to whom a serial port is exclusive: to root it is not.</summary>
    public Workplace AsOrdinaryUser()
    {
        _user = OrdinaryUser.Make(Folder);
        return this;
    }

    public string Path(string name) => System.IO.Path.Combine(Folder, name);

    /// <summary>The bounds of the shipped fake benches, at which a loaded machine trips no sound bench: for tests of what
    /// happens, not of how soon.</summary>
    private const string PatientSafety = "safety: { reply-within: 1500 ms, guardian-silence: 2 s }\n";

    /// <summary>Gives a bench file that a fake bench wrote, which has the default bounds, those of the shipped
    /// ones.</summary>
    public static void MakePatient(string file)
    {
        // Written anew: the file may be another user's.
        string text = File.ReadAllText(file);
        File.Delete(file);
        File.WriteAllText(file, text.TrimEnd() + "\n" + PatientSafety);
    }

    /// <summary>A copy of the shipped fake bench with other faults or another seed, beside the shipped dialects.</summary>
    public string FakeBenchFile(string fake)
    {
        string shipped = File.ReadAllText(Repository("sequences", "benches", "fake.yaml"));
        string line = shipped.Split('\n').Single(l => l.StartsWith("fake:", StringComparison.Ordinal));
        Directory.CreateDirectory(Path("benches"));
        string file = System.IO.Path.Combine(Path("benches"), "fake.yaml");
        File.WriteAllText(file, shipped.Replace(line, $"fake: {fake}", StringComparison.Ordinal));
        return file;
    }

    /// <summary>The shipped sequence with lines replaced.</summary>
    public string SequenceFile(params (string Old, string New)[] edits)
    {
        string text = File.ReadAllText(Sequence);
        foreach ((string old, string replacement) in edits)
        {
            Assert.Contains(old, text, StringComparison.Ordinal);
            text = text.Replace(old, replacement, StringComparison.Ordinal);
        }

        string file = Path("sequence.yaml");
        File.WriteAllText(file, text);
        return file;
    }

    /// <summary>A shipped sequence cut down to one of its points and 2 valid captures of at most 8.</summary>
    /// <param name="point">The point that stays.</param>
    /// <param name="sequence">File name of the sequence.</param>
    /// <param name="edits">Further texts to replace.</param>
    public string OnePoint(
        string point, string sequence = "winch-drive-incoming.yaml", params (string Old, string New)[] edits)
    {
        List<string> kept = [];
        bool isOther = false;
        foreach (string line in File.ReadAllLines(Repository("sequences", sequence)))
        {
            isOther = line.StartsWith("  - name: ", StringComparison.Ordinal)
                ? line != $"  - name: {point}"
                : isOther && line.StartsWith("    ", StringComparison.Ordinal);
            if (!isOther && (!line.Contains(" at: ", StringComparison.Ordinal)
                || line.Contains($" at: {point},", StringComparison.Ordinal)))
            {
                kept.Add(line);
            }
        }

        string text = string.Join('\n', kept);
        foreach ((string old, string replacement) in
            (IEnumerable<(string, string)>)[("valid: 5, at-most: 20", "valid: 2, at-most: 8"), .. edits])
        {
            Assert.Contains(old, text, StringComparison.Ordinal);
            text = text.Replace(old, replacement, StringComparison.Ordinal);
        }

        string file = Path("one-point.yaml");
        File.WriteAllText(file, text);
        return file;
    }

    public async Task<Finished> Run(params string[] arguments)
    {
        using Started started = Start(arguments);
        return await started.End();
    }

    public Started Start(params string[] arguments) => Start(Program, arguments);

    public Started Start(string program, IEnumerable<string> arguments)
    {
        if (_user is { } user)
        {
            (program, arguments) = user.Command(program, arguments);
        }

        var start = new ProcessStartInfo(program)
        {
            WorkingDirectory = Folder,
            RedirectStandardInput = true,
            RedirectStandardOutput = true,
            RedirectStandardError = true,
            UseShellExecute = false,
        };
        foreach (string argument in arguments)
        {
            start.ArgumentList.Add(argument);
        }

        return new Started(Process.Start(start)!, _patience);
    }

    /// <summary>One value of the evidence, by plain SQL as a quality engineer would ask it.</summary>
    public T Ask<T>(string sql, string? file = null)
    {
        List<object[]> rows = Rows(sql, file);
        return (T)Convert.ChangeType(
            rows.Single().Single(), typeof(T), System.Globalization.CultureInfo.InvariantCulture);
    }

    public List<object[]> Rows(string sql, string? file = null)
    {
        using var connection = new SqliteConnection($"Data Source={file ?? Evidence};Mode=ReadOnly;Pooling=False");
        connection.Open();
        using SqliteCommand command = connection.CreateCommand();
#pragma warning disable CA2100 // The tests' own SQL.
        command.CommandText = sql;
#pragma warning restore CA2100
        using SqliteDataReader reader = command.ExecuteReader();
        var rows = new List<object[]>();
        while (reader.Read())
        {
            var row = new object[reader.FieldCount];
            reader.GetValues(row);
            rows.Add(row);
        }

        return rows;
    }

    public void Dispose()
    {
        try
        {
            _folder.Delete(recursive: true);
        }
        catch (IOException)
        {
            // A process that was killed for real may still hold a file for a moment; the folder is a temporary one.
        }
    }

    private static string Built(string project, string program)
    {
        string configuration = AppContext.BaseDirectory.Contains("release", StringComparison.OrdinalIgnoreCase)
            ? "release" : "debug";
        string name = OperatingSystem.IsWindows() ? program + ".exe" : program;
        return Repository("artifacts", "bin", project, configuration, name);
    }

    private static string Root()
    {
        DirectoryInfo? folder = new(AppContext.BaseDirectory);
        while (folder is not null && !File.Exists(System.IO.Path.Combine(folder.FullName, "BenchRunner.sln")))
        {
            folder = folder.Parent;
        }

        return folder?.FullName ?? throw new InvalidOperationException(
            "BenchRunner.sln is in no folder above the tests.");
    }
}
