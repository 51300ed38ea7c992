namespace BenchRunner.Safety.Tests.Benches;

/// <summary>Where the repository lies above the built tests.</summary>
internal static class Repository
{
    public static string File(params string[] parts)
    {
        DirectoryInfo? folder = new(AppContext.BaseDirectory);
        while (folder is not null && !System.IO.File.Exists(Path.Combine(folder.FullName, "BenchRunner.sln")))
        {
            folder = folder.Parent;
        }

        return Path.Combine([folder?.FullName ?? throw new DirectoryNotFoundException("BenchRunner.sln"), .. parts]);
    }
}
