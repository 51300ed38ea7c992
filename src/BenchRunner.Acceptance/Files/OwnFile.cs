namespace BenchRunner.Acceptance.Files;

/// <summary>Files that this program makes for a lab's records: readable by their owner and the owner's group alone, and
/// never written through a symbolic link, which somebody else may have laid.</summary>
/// <remarks>Whoever may write in the folder can still exchange the file: its rights are the lab's. On Windows, rights
/// come from the folder.</remarks>
public static class OwnFile
{
    /// <summary>0640.</summary>
    public const UnixFileMode Mode = UnixFileMode.UserRead | UnixFileMode.UserWrite | UnixFileMode.GroupRead;

    /// <summary>Where a path leads as a symbolic link, whole or dangling; null where it is none. Only the last part is
    /// looked at: a folder may be a link.</summary>
    public static string? LinkTarget(string path) => new FileInfo(path).LinkTarget;

    /// <summary>Makes an empty file where there is none; one that is there keeps its rights.</summary>
    /// <exception cref="IOException">It cannot be made.</exception>
    public static void Make(string path)
    {
        if (!File.Exists(path))
        {
            using FileStream made = Open(path, FileMode.CreateNew, FileAccess.Write, FileShare.ReadWrite);
        }
    }

    /// <summary>Opens a file, making it with these rights where the mode may make one.</summary>
    /// <exception cref="IOException">It cannot be opened, or is a symbolic link.</exception>
    public static FileStream Open(string path, FileMode mode, FileAccess access, FileShare share)
    {
        if (LinkTarget(path) is { } target)
        {
            throw new IOException($"{path} is a symbolic link to {target}; remove the link or name the file itself");
        }

        var options = new FileStreamOptions { Mode = mode, Access = access, Share = share };
        if (!OperatingSystem.IsWindows() && mode != FileMode.Open)
        {
            options.UnixCreateMode = Mode;
        }

        return new FileStream(path, options);
    }

    /// <summary>Writes a short text in place of what a file holds.</summary>
    /// <exception cref="IOException">It cannot be written, or is a symbolic link.</exception>
    public static void Write(string path, string text)
    {
        using FileStream file = Open(path, FileMode.Create, FileAccess.Write, FileShare.Read);
        file.Write(System.Text.Encoding.UTF8.GetBytes(text));
    }
}
