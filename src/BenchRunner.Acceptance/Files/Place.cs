namespace BenchRunner.Acceptance.Files;

/// <summary>A place in a file that a person wrote.</summary>
/// <param name="File">The file as the user named it.</param>
/// <param name="Line">Line, from 1; 0 where the whole file is meant.</param>
/// <param name="Column">Column, from 1; 0 where the whole line is meant.</param>
public readonly record struct Place(string File, int Line, int Column)
{
    /// <summary>The place as <c>file:line:column</c>.</summary>
    public override string ToString() =>
        Line == 0 ? File : Column == 0 ? $"{File}:{Line}" : $"{File}:{Line}:{Column}";
}
