namespace BenchRunner.Benchmarks;

/// <summary>One row of the table: what was measured, beside what, and whether the goal is met.</summary>
/// <param name="Goal">The goal; it does not change.</param>
/// <param name="Last">The last measurement, which stands.</param>
/// <param name="Figures">Of each measurement the figure that the goal is held against: a missed row is repeated
/// twice.</param>
internal sealed record Row(Goal Goal, Outcome Last, IReadOnlyList<double?> Figures)
{
    /// <summary>The figure that stands; null where what it is of is missing.</summary>
    public double? Figure => FigureOf(Goal, Last);

    /// <summary>Whether the goal is met; never where something is missing.</summary>
    public bool IsMet => Last.Missing is null && Figure is { } figure && Goal.IsMetBy(figure);

    /// <summary>Ours over peer or floor, or ours itself.</summary>
    public static double? FigureOf(Goal goal, Outcome outcome) => goal.Of switch
    {
        "peer" => outcome.Ours?.Median / outcome.Peer?.Median,
        "floor" => outcome.Ours?.Median / outcome.Floor?.Median,
        _ => outcome.Ours?.Median,
    };

    /// <summary>The row as it is written to JSON.</summary>
    public object ToJson() => new
    {
        group = Goal.Group,
        work = Goal.Work,
        unit = Last.Unit,
        ours = Last.Ours?.Median,
        peer = Last.Peer?.Median,
        floor = Last.Floor?.Median,
        goal = Goal.Bounds.Count == 1 ? (object)Goal.Bounds[0] : Goal.Bounds,
        of = Goal.Of,
        better = Goal.Better,
        met = IsMet,
        figure = Figure,
        ours_spread = Last.Ours?.Spread,
        peer_spread = Last.Peer?.Spread,
        floor_spread = Last.Floor?.Spread,
        ours_least_wall = Last.Ours?.LeastWall,
        peer_least_wall = Last.Peer?.LeastWall,
        floor_least_wall = Last.Floor?.LeastWall,
        figures = Figures,
        own = Goal.IsOwn,
        missing = Last.Missing,
        note = Last.Note,
        what = Goal.What,
    };
}
