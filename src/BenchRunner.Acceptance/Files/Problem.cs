namespace BenchRunner.Acceptance.Files;

/// <summary>A mistake in an input: where it is, what was found, what was expected, what to do.</summary>
/// <param name="Where">The place.</param>
/// <param name="Found">What was found, e.g. <c>bus-voltage is 1250 V</c>.</param>
/// <param name="Expected">What was expected, e.g. <c>at most the bench envelope of 1000 V</c>.</param>
/// <param name="Advice">What to do, e.g. <c>lower it or choose another bench</c>.</param>
/// <remarks>Mistakes in input are values, gathered in full; the shell prints them and ends with exit code 2.</remarks>
public sealed record Problem(Place Where, string Found, string Expected, string Advice)
{
    /// <summary>The message, one line: place: found; expected; advice.</summary>
    public override string ToString() =>
        $"{Where}: {Found}; expected {Expected}; {Advice}{(Advice.EndsWith('?') ? "" : ".")}";
}
