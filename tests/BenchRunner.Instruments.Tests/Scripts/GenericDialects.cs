using BenchRunner.Instruments.Dialects;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>The shipped dialect files, read as plainly as they are written: operation, colon, command in single
/// quotes.</summary>
internal static class GenericDialects
{
    public static Dialect Read(string role, string? identity = null)
    {
        var folder = new DirectoryInfo(AppContext.BaseDirectory);
        while (!Directory.Exists(Path.Combine(folder.FullName, "sequences", "dialects")))
        {
            folder = folder.Parent ?? throw new DirectoryNotFoundException(
                "sequences/dialects is not above the test's folder");
        }

        var name = $"generic-{role}";
        var commands = File.ReadAllLines(Path.Combine(folder.FullName, "sequences", "dialects", name + ".yaml"))
            .Where(l => l.StartsWith("  ", StringComparison.Ordinal) && l.EndsWith('\''))
            .Select(l => l.Trim().Split(": '"))
            .ToDictionary(l => l[0], l => l[1].TrimEnd('\''));
        return new Dialect(name, identity, commands);
    }
}
