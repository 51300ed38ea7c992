using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Instruments.Roles;

/// <summary>One setting of a scope: the command, the question that asks it back, and the judge of the answer.</summary>
/// <param name="Command">The command that sets it.</param>
/// <param name="Query">The question; null where the dialect has none.</param>
/// <param name="Difference">What the answer says where it is not what was set; null where it is.</param>
internal sealed record ScopeSetting(string Command, string? Query, ReplyParser<string?> Difference)
{
    /// <summary>A setting that is a number.</summary>
    public static ScopeSetting Number(string command, string query, double value, double tolerance) => new(
        command,
        query,
        reply => ReplyNumber.Parse(reply) is var found && Math.Abs(found - value) <= tolerance
            ? null
            : FormattableString.Invariant($"{found:R}"));

    /// <summary>A setting that is one word or a list of words and numbers.</summary>
    public static ScopeSetting Words(string command, string? query) => new(
        command,
        query,
        reply => string.Join(',', ReplyList.Elements(reply)) is var found && Same(Parameter(command), found)
            ? null : found);

    /// <summary>What a command sets: everything after its header.</summary>
    public static string Parameter(string command) => command[(command.IndexOf(' ', StringComparison.Ordinal) + 1)..];

    /// <summary>Whether an answer means the same list, its words in long or short form.</summary>
    public static bool Same(string parameter, string answer)
    {
        var wanted = parameter.Split(',', StringSplitOptions.TrimEntries);
        var found = answer.Split(',', StringSplitOptions.TrimEntries);
        return wanted.Length == found.Length
            && wanted.Zip(found).All(pair => Mnemonic.Matches(pair.First, pair.Second));
    }
}
