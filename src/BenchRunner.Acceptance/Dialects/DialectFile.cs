using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Dialects;

/// <summary>The data file that says which SCPI commands a role's operations are on one family of instruments.</summary>
/// <param name="Name">Name, e.g. <c>generic-supply</c>.</param>
/// <param name="Role">The role it serves.</param>
/// <param name="Identity">Regular expression for the answer to <c>*IDN?</c>; null: any.</param>
/// <param name="Commands">Operation to command; every operation of the role is present, but for optional ones.</param>
/// <param name="Source">The exact bytes it was read from.</param>
public sealed record DialectFile(
    string Name, string Role, string? Identity, IReadOnlyDictionary<string, string> Commands, SourceFile Source)
{
    /// <summary>What the instrument does otherwise on the wire than the standard says.</summary>
    public WireHabits Wire { get; init; } = WireHabits.Standard;
}
