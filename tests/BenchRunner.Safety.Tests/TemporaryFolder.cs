namespace BenchRunner.Safety.Tests;

/// <summary>A folder of a test's own, gone with it.</summary>
internal sealed class TemporaryFolder : IDisposable
{
    private readonly DirectoryInfo _folder = Directory.CreateTempSubdirectory("benchrunner-");

    public string File(string name) => Path.Combine(_folder.FullName, name);

    public void Dispose() => _folder.Delete(recursive: true);
}
