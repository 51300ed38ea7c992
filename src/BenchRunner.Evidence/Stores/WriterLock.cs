using System.Globalization;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Evidence.Stores;

/// <summary>One writer a file: a sibling file held open exclusively while the store is open.</summary>
/// <remarks>
/// The operating system lets go of it when the process dies, however it dies; the sibling itself stays, since removing
/// it could take it from under the next holder. Who holds it stands in a second sibling, for messages alone.
/// </remarks>
internal sealed class WriterLock : IDisposable
{
    private readonly FileStream _file;
    private readonly string _holderPath;

    private WriterLock(FileStream file, string holderPath)
    {
        _file = file;
        _holderPath = holderPath;
    }

    /// <summary>Takes the lock.</summary>
    /// <exception cref="EvidenceException">Another writer holds it, or the sibling cannot be made.</exception>
    public static WriterLock Take(string path, TimeProvider time)
    {
        string lockPath = path + "-writer";
        string holderPath = path + "-writer-holder";
        FileStream? file = null;
        try
        {
            file = OwnFile.Open(lockPath, FileMode.OpenOrCreate, FileAccess.ReadWrite, FileShare.None);
            string holder = string.Create(
                CultureInfo.InvariantCulture, $"process {Environment.ProcessId} since {Text.Time(time.GetUtcNow())}");
            OwnFile.Write(holderPath, holder);
            return new WriterLock(file, holderPath);
        }
        catch (IOException) when (file is null && File.Exists(lockPath))
        {
            throw new EvidenceException(
                $"{path}: is being written by {Holder(holderPath)}; end that program or name another file.");
        }
        catch (Exception error) when (error is IOException or UnauthorizedAccessException)
        {
            file?.Dispose();
            throw new EvidenceException(
                $"{path}: its folder cannot be written; check its rights and free space, or name another file.", error);
        }
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        try
        {
            File.Delete(_holderPath);
        }
        catch (Exception error) when (error is IOException or UnauthorizedAccessException)
        {
            // A stale name of a holder misleads nobody: it is read only while the lock is held.
        }

        _file.Dispose();
    }

    private static string Holder(string holderPath)
    {
        try
        {
            return File.ReadAllText(holderPath);
        }
        catch (Exception error) when (error is IOException or UnauthorizedAccessException)
        {
            return "another process";
        }
    }
}
