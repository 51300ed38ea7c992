namespace BenchRunner.Acceptance.Decisions;

/// <summary>Conformity of a value with a limit, per ISO 14253-1 and JCGM 106.</summary>
public enum Conformity
{
    /// <summary>The value conforms, guard band included.</summary>
    Conforms,

    /// <summary>The value fails, guard band included.</summary>
    Fails,

    /// <summary>The value lies where the guard bands leave it open, or could not be formed.</summary>
    Undecided,
}
