using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Dialects;

/// <summary>Reads dialect files. Never throws for what a file holds: every mistake is a problem, all at once.</summary>
public static class DialectReader
{
    /// <summary>What a dialect's name looks like: no separators, so that none leads out of its folder.</summary>
    internal const string NamePattern = "[a-z0-9][a-z0-9-]{0,63}";

    /// <summary>That pattern in words.</summary>
    internal const string NameWanted = "a name of lower-case letters, digits and '-'";

    private const string Role = "dialect";

    /// <summary>Reads a dialect file.</summary>
    /// <param name="path">Its path.</param>
    public static Read<DialectFile> Read(string path) => FormatReader.Open(Role, path, Read);

    /// <summary>Reads the bytes of a dialect file.</summary>
    /// <param name="source">The file.</param>
    public static Read<DialectFile> Read(SourceFile source) =>
        FormatReader.Read(source, DialectKeys.Root, WireKeys.Check, file => Build(file, source));

    /// <summary>Reads the dialect that a bench file names for a role.</summary>
    /// <param name="name">The name.</param>
    /// <param name="role">The role that it must serve.</param>
    /// <param name="folders">Where dialects lie, looked through in this order.</param>
    /// <param name="where">Where the bench file names it.</param>
    public static Read<DialectFile> Find(string name, string role, IReadOnlyList<string> folders, Place where)
    {
        ArgumentNullException.ThrowIfNull(folders);
        if (!Expression.Holds(NamePattern, name))
        {
            return new Read<DialectFile>(null, [new Problem(
                where, $"the dialect is {Shown.Quote(name)}", NameWanted, "correct it")]);
        }

        foreach (string folder in folders)
        {
            string path = Path.Combine(folder, name + ".yaml");
            if (!File.Exists(path))
            {
                continue;
            }

            if (LeadsOut(path, folder))
            {
                return new Read<DialectFile>(null, [new Problem(
                    where,
                    $"the dialect {name} is a link to a file outside {folder}",
                    "a file in that folder",
                    "copy the file there")]);
            }

            return OfRole(Read(path), name, role, where);
        }

        return new Read<DialectFile>(null, [new Problem(
            where,
            $"there is no dialect {name}",
            $"a file {name}.yaml in {Shown.Or(folders)}",
            "correct the name or bring the file there")]);
    }

    private static Read<DialectFile> OfRole(Read<DialectFile> read, string name, string role, Place where)
    {
        if (read.Value is not { } dialect || (dialect.Role == role && dialect.Name == name))
        {
            return read;
        }

        return new Read<DialectFile>(null, [new Problem(
            where,
            $"the file of the dialect {name} holds {dialect.Name} for the role {dialect.Role}",
            $"{name} for the role {role}",
            "name another dialect")]);
    }

    private static bool LeadsOut(string path, string folder)
    {
        if (File.ResolveLinkTarget(path, returnFinalTarget: true) is not { } target)
        {
            return false;
        }

        FileSystemInfo home = Directory.ResolveLinkTarget(folder, returnFinalTarget: true) ?? new DirectoryInfo(folder);
        return Path.GetRelativePath(home.FullName, target.FullName) is var way
            && (way.StartsWith("..", StringComparison.Ordinal) || Path.IsPathRooted(way));
    }

    private static DialectFile Build(Fields file, SourceFile source)
    {
        Fields commands = file.Block("commands");
        return new DialectFile(
            file.Text("dialect")!,
            file.Text("role")!,
            file.Text("identity"),
            commands.Keys.ToDictionary(key => key, key => commands.Text(key)!),
            source)
        {
            Wire = WireKeys.Of(file.Block("wire")),
        };
    }
}
