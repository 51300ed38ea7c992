namespace BenchRunner.Evidence.Placements;

/// <summary>Where a device that was not accepted was put: a person's acknowledgement of its outcome. Not to be confused
/// with a note, which says what became of a device of a lot.</summary>
/// <param name="Run">Identity of the run that did not accept it.</param>
/// <param name="Place">The place in the person's words, e.g. <c>red bin 3</c>.</param>
/// <param name="By">Who put it there.</param>
public sealed record Placement(string Run, string Place, string By)
{
    /// <summary>The longest place and name, characters.</summary>
    public const int LongestText = 1000;
}
