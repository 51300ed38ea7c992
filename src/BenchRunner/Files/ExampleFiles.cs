namespace BenchRunner.Files;

/// <summary>Finds shipped files: in the working folder first, then beside the executable.</summary>
internal static class ExampleFiles
{
    /// <summary>The bench of a run that names none: a simulated one.</summary>
    public const string FakeBench = "sequences/benches/fake.yaml";

    /// <summary>The tolerances of a comparison that names none.</summary>
    public const string Tolerances = "sequences/tolerances/common-practice.yaml";

    /// <summary>The path as given where it exists, else the shipped file of that name; as given where neither
    /// exists.</summary>
    public static string Find(string path)
    {
        if (File.Exists(path) || Path.IsPathRooted(path))
        {
            return path;
        }

        string shipped = Path.Combine(AppContext.BaseDirectory, path);
        return File.Exists(shipped) ? shipped : path;
    }

    /// <summary>Where dialects are looked for: the folder beside the bench file's own, the working folder's, the
    /// shipped ones.</summary>
    public static IReadOnlyList<string> DialectFolders(string benchPath) =>
    [
        Path.GetFullPath(Path.Combine(Path.GetDirectoryName(Path.GetFullPath(benchPath)) ?? ".", "..", "dialects")),
        Path.GetFullPath("sequences/dialects"),
        Path.Combine(AppContext.BaseDirectory, "sequences", "dialects"),
    ];
}
