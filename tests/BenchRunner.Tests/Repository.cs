namespace BenchRunner.Tests;

/// <summary>Where the repository is, seen from the tests' own folder.</summary>
internal static class Repository
{
    public static string Root { get; } = Find();

    public static string File(params string[] parts) => Path.Combine([Root, .. parts]);

    private static string Find()
    {
        for (DirectoryInfo? folder = new(AppContext.BaseDirectory); folder is not null; folder = folder.Parent)
        {
            if (System.IO.File.Exists(Path.Combine(folder.FullName, "BenchRunner.sln")))
            {
                return folder.FullName;
            }
        }

        throw new InvalidOperationException("BenchRunner.sln is in no folder above the tests.");
    }
}
