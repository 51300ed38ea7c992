namespace BenchRunner.Acceptance.Validity;

/// <summary>One rule by which a capture is kept, kept with a note, taken again, or ends the run.</summary>
/// <param name="Name">Name, e.g. <c>current-within</c>; the key in a sequence file.</param>
/// <param name="Class">What a finding does, in words: <c>retry</c>, <c>stop</c>, or which when.</param>
/// <param name="Meaning">When there is a finding.</param>
/// <param name="Default">Its bound where the sequence states none, in words; empty where it has none to state.</param>
/// <param name="Uses">Quantities that it looks at: none of them may be limited, for captures must not be chosen by
/// them.</param>
public sealed record Criterion(string Name, string Class, string Meaning, string Default, IReadOnlyList<string> Uses);
