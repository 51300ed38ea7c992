using System.Globalization;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Safety.Locks;

/// <summary>One run a bench: a lock file beside the bench file, held open while the run lasts.</summary>
/// <remarks>The operating system lets go of it when the process dies, however it dies; the file itself may
/// stay.</remarks>
public sealed class BenchLock : IDisposable
{
    private readonly FileStream _file;

    private BenchLock(FileStream file) => _file = file;

    /// <summary>Takes the lock of a bench.</summary>
    /// <param name="benchFile">The bench file.</param>
    /// <param name="now">The time that others read as the start of the run, UTC.</param>
    /// <param name="holder">Who holds it where it is taken already, e.g. <c>process 4711 since …</c>; else
    /// null.</param>
    /// <returns>The lock, or null where another process holds it.</returns>
    /// <exception cref="IOException">The lock file cannot be made.</exception>
    public static BenchLock? TryTake(string benchFile, DateTimeOffset now, out string? holder)
    {
        string path = Path.ChangeExtension(Path.GetFullPath(benchFile), ".lock");
        string holderPath = path + "-holder";
        if (OwnFile.LinkTarget(path) is { } target)
        {
            holder = $"nobody knows: its lock {path} is a symbolic link to {target}; remove the link";
            return null;
        }

        try
        {
            FileStream file = OwnFile.Open(path, FileMode.OpenOrCreate, FileAccess.ReadWrite, FileShare.None);
            OwnFile.Write(
                holderPath,
                string.Create(CultureInfo.InvariantCulture, $"process {Environment.ProcessId} since "
                    + $"{now:yyyy-MM-ddTHH:mm:ssZ}"));
            holder = null;
            return new BenchLock(file);
        }
        catch (IOException) when (File.Exists(path))
        {
            holder = File.Exists(holderPath) ? File.ReadAllText(holderPath) : "another process";
            return null;
        }
    }

    /// <inheritdoc/>
    public void Dispose() => _file.Dispose();
}
