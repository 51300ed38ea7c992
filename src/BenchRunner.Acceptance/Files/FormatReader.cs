using System.Globalization;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Files;

/// <summary>The way from the bytes of a file to its model: tree, shape, rules across keys, model.</summary>
internal static class FormatReader
{
    /// <summary>The format that this program reads.</summary>
    public const int Format = 1;

    /// <summary>The key that every file starts with.</summary>
    public static Key FormatKey { get; } =
        Key.Needed("format", new WholeShape("Version of the format; stands first.", Format, Format, Format));

    /// <summary>Reads a file that is named by its path.</summary>
    /// <param name="role">What it is to the run, e.g. <c>sequence</c>.</param>
    /// <param name="path">The path.</param>
    /// <param name="read">Reads its bytes.</param>
    public static Read<T> Open<T>(string role, string path, Func<SourceFile, Read<T>> read)
        where T : class
    {
        ArgumentNullException.ThrowIfNull(path);
        var problems = new List<Problem>();
        return SourceFiles.Open(role, path, problems) is { } source ? read(source) : new Read<T>(null, problems);
    }

    /// <summary>Reads the bytes of a file.</summary>
    /// <param name="source">The file.</param>
    /// <param name="shape">What it may hold.</param>
    /// <param name="check">The rules across keys, on what is sound.</param>
    /// <param name="build">Makes the model where nothing is wrong.</param>
    public static Read<T> Read<T>(
        SourceFile source, BlockShape shape, Action<Fields, List<Problem>> check, Func<Fields, T> build)
        where T : class
    {
        ArgumentNullException.ThrowIfNull(source);
        var problems = new List<Problem>();
        YamlNode? root = YamlTree.Read(source, problems);
        if (root is not null && IsOurs(root, source, problems)
            && shape.Read(root, $"the {source.Role} file", null, problems) is Fields fields)
        {
            if (root is YamlMap { IsWhole: true })
            {
                check(fields, problems);
            }

            if (problems.Count == 0)
            {
                return new Read<T>(build(fields), []);
            }
        }

        return new Read<T>(
            null, [.. problems.OrderBy(problem => problem.Where.Line).ThenBy(problem => problem.Where.Column)]);
    }

    /// <summary>Whether the format is ours. Of a newer one nothing more is said: its keys are not known here.</summary>
    private static bool IsOurs(YamlNode root, SourceFile source, List<Problem> problems)
    {
        if (root is not YamlMap map || map.Find("format") is not YamlScalar format)
        {
            return true;
        }

        if (int.TryParse(format.Text, NumberStyles.None, CultureInfo.InvariantCulture, out int number)
            && number > Format)
        {
            problems.Add(new Problem(
                format.Where,
                $"the {source.Role} file has format {number}",
                $"format {Format}, the newest that this program reads",
                "use a newer benchrunner, or the file's older revision"));
            return false;
        }

        if (map.Entries[0] is { Key: not "format" } first)
        {
            problems.Add(new Problem(
                first.At,
                $"the first key is {Shown.Quote(first.Key)}",
                "format as the first key",
                "move format: 1 to the top"));
        }

        return true;
    }
}
