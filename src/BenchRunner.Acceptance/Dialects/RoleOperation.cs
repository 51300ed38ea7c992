namespace BenchRunner.Acceptance.Dialects;

/// <summary>One operation of a role, as a dialect must give its command.</summary>
/// <param name="Name">Its key in a dialect file, e.g. <c>set-voltage</c>.</param>
/// <param name="IsQuery">Whether the instrument answers, so that the command has a question mark.</param>
/// <param name="TakesValue">Whether the command must have <c>{value}</c>.</param>
/// <param name="TakesChannel">Whether the command must have <c>{channel}</c>, the scope's own channel number.</param>
/// <param name="IsOptional">Whether a dialect may leave it out, as not every instrument of the role can do it.</param>
public sealed record RoleOperation(
    string Name, bool IsQuery, bool TakesValue, bool TakesChannel, bool IsOptional = false);
