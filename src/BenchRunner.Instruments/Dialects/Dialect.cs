namespace BenchRunner.Instruments.Dialects;

/// <summary>The commands that a role's operations are on one family of instruments.</summary>
/// <param name="Name">Name, e.g. <c>generic-supply</c>.</param>
/// <param name="Identity">Regular expression that the answer to <c>*IDN?</c> must match; null: any.</param>
/// <param name="Commands">Operation, e.g. <c>set-voltage</c>, to the command with its placeholders {value} and
/// {channel}.</param>
public sealed record Dialect(string Name, string? Identity, IReadOnlyDictionary<string, string> Commands)
{
    /// <summary>What the instruments do otherwise on the wire than the standard says.</summary>
    public WireHabits Wire { get; init; } = WireHabits.Standard;
}
