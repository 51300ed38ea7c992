using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Dialects;

/// <summary>The keys of a dialect file: the one table behind reader, messages and schema.</summary>
internal static class DialectKeys
{
    /// <summary>The whole file.</summary>
    public static BlockShape Root { get; } = new(
        "The commands of one family of instruments in one role.",
        [
            FormatReader.FormatKey,
            Key.Needed("dialect", new TextShape(
                "Name; the file has the same.", "generic-supply", DialectReader.NamePattern, DialectReader.NameWanted)),
            Key.Needed("role", new WordShape("The role.", [.. RoleOperations.All.Keys])),
            Key.Optional("identity", new ExpressionShape(
                "Regular expression that the whole answer to *IDN? must match.", "[^,]+,PS-[0-9]+,.*")),
            Key.Optional("wire", WireKeys.Block),
            Key.Needed("commands", new ChosenShape(
                "The command of each operation of the role.",
                "role",
                RoleOperations.All.ToDictionary(role => role.Key, role => (Shape)Commands(role.Value)))),
        ],
        Sample: BlockShape.Shipped);

    private static BlockShape Commands(IReadOnlyList<RoleOperation> operations) => new BlockShape(
        "", [.. operations.Select(o => new Key(o.Name, new CommandShape(o), IsRequired: !o.IsOptional))]);
}
