namespace BenchRunner.Acceptance.Files;

/// <summary>Reads the exact bytes of the files that people name.</summary>
internal static class SourceFiles
{
    /// <summary>Reads a file.</summary>
    /// <param name="role">What it is to the run, e.g. <c>sequence</c>.</param>
    /// <param name="path">The path as the user named it.</param>
    /// <param name="problems">Takes the reason where it cannot be read.</param>
    /// <returns>The file; null where it cannot be read.</returns>
    public static SourceFile? Open(string role, string path, List<Problem> problems)
    {
        try
        {
            // One byte more than allowed is enough to be refused; an endless device is not read to its end.
            using FileStream stream = new(path, FileMode.Open, FileAccess.Read, FileShare.ReadWrite | FileShare.Delete);
            var bytes = new byte[YamlTree.MaximumBytes + 1];
            int length = stream.ReadAtLeast(bytes, bytes.Length, throwOnEndOfStream: false);
            return new SourceFile(role, path, bytes[..length]);
        }
        catch (Exception wrong) when (wrong is IOException or UnauthorizedAccessException or ArgumentException
            or NotSupportedException)
        {
            (string found, string advice) = wrong switch
            {
                FileNotFoundException or DirectoryNotFoundException => ("there is no such file", "check the path"),
                UnauthorizedAccessException when Directory.Exists(path) => ("this is a folder", "name a file in it"),
                UnauthorizedAccessException => ("the file may not be read", "check its permissions"),
                _ => ($"the file cannot be read ({Shown.Cut(wrong.Message)})", "check path and disk"),
            };
            problems.Add(new Problem(new Place(Shown.Cut(path), 0, 0), found, $"a {role} file", advice));
            return null;
        }
    }
}
