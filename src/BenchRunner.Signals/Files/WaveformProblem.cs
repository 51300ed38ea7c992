namespace BenchRunner.Signals.Files;

/// <summary>A mistake in a waveform file: where it is, what was found, what was expected, what to do.</summary>
/// <param name="File">The file as the user named it.</param>
/// <param name="Line">Line, from 1; 0 where the whole file is meant.</param>
/// <param name="Column">Character in the line, from 1; 0 where the whole line is meant.</param>
/// <param name="Found">What was found.</param>
/// <param name="Expected">What was expected.</param>
/// <param name="Advice">What to do.</param>
public sealed record WaveformProblem(
    string File, int Line, int Column, string Found, string Expected, string Advice)
{
    /// <summary>The message, one line: <c>file:line:column: found; expected …; advice.</c></summary>
    public override string ToString()
    {
        string place = Line == 0 ? File : Column == 0 ? $"{File}:{Line}" : $"{File}:{Line}:{Column}";
        return $"{place}: {Found}; expected {Expected}; {Advice}{(Advice.EndsWith('?') ? "" : ".")}";
    }
}
