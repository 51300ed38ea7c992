namespace BenchRunner.Soak;

/// <summary>What all mixes together may not leave behind: descriptors of this process, files in its temporary
/// folder.</summary>
/// <remarks>Descriptors are compared by what they point to (<c>/proc/self/fd</c>, Linux; elsewhere they are not
/// looked at). No garbage is collected first: what only a finaliser closes is leaked.</remarks>
internal sealed class Leaks
{
    private const string Descriptors = "/proc/self/fd";

    private readonly string _folder;
    private readonly List<string> _before;

    /// <summary>Takes stock; the runtime has opened by now what it opens once.</summary>
    /// <param name="folder">The temporary folder of the mixes.</param>
    public Leaks(string folder) => (_folder, _before) = (folder, [.. Open(), .. Files(folder)]);

    /// <summary>What is there now and was not then, a line each.</summary>
    public IEnumerable<string> Found()
    {
        List<string> before = [.. _before];
        return [.. Open().Concat(Files(_folder)).Where(one => !before.Remove(one)).Select(one => $"left behind: {one}")];
    }

    private static IEnumerable<string> Open() => Directory.Exists(Descriptors)
        ? Directory.GetFiles(Descriptors).Select(Target).OfType<string>()
        : [];

    private static string[] Files(string folder) => Directory.GetFileSystemEntries(folder);

    /// <returns>What a descriptor points to, without the number of a pipe or socket; null: it was that of the listing
    /// itself, or one of the runtime's own for code that it has loaded.</returns>
    private static string? Target(string descriptor) =>
        new FileInfo(descriptor).LinkTarget is { } target && Path.GetExtension(target) is not (".dll" or ".so")
            ? target.Split(":[")[0] : null;
}
