namespace BenchRunner.Evidence.Notes;

/// <summary>What a person did with a device after it was decided.</summary>
public enum NoteKind
{
    /// <summary>It was released for use.</summary>
    Release,

    /// <summary>It was scrapped.</summary>
    Scrap,

    /// <summary>It was returned to who delivered it.</summary>
    Return,

    /// <summary>It is used though it was not accepted, by somebody's leave.</summary>
    Concession,
}
