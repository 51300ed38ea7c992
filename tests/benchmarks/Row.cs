namespace BenchRunner.Benchmarks;

/// <summary>One row of the table: what was measured, beside what, and whether the goal is met.</summary>
/// <param name="Group">Group of the row, e.g. <c>fake</c>.</param>
/// <param name="Work">Name of the work; the goal is its own and does not change.</param>
/// <param name="Unit">Unit of the figures.</param>
/// <param name="Ours">Median of the rounds.</param>
/// <param name="Spread">Half the distance of the rounds' quartiles, relative.</param>
/// <param name="Peer">The same of a general-purpose program in the same run; null: not there.</param>
/// <param name="Floor">What the machine itself allows, in the same run; null: not there.</param>
/// <param name="Goal">The goal: a ratio to peer or floor, or a figure of ours.</param>
/// <param name="Of">What the goal is of: <c>peer</c>, <c>floor</c> or <c>ours</c>.</param>
/// <param name="Better">Whether <c>lower</c> or <c>higher</c> is better.</param>
/// <param name="Missing">What is missing to measure the row whole; null: nothing.</param>
internal sealed record Row(
    string Group,
    string Work,
    string Unit,
    double Ours,
    double Spread,
    double? Peer,
    double? Floor,
    double Goal,
    string Of,
    string Better,
    string? Missing = null)
{
    /// <summary>The figure that the goal is held against; null where what it is of is missing.</summary>
    public double? Figure => Of switch
    {
        "peer" => Ours / Peer,
        "floor" => Ours / Floor,
        _ => Ours,
    };

    /// <summary>Whether the goal is met; never where something is missing.</summary>
    public bool Met => Figure is { } figure && (Better == "lower" ? figure <= Goal : figure >= Goal);
}
