namespace BenchRunner.Evidence.Entries;

/// <summary>Something that was added after the runs it concerns, with a seal of its own.</summary>
/// <param name="Entry">Its identity: a UUID version 7 as text.</param>
/// <param name="At">When it was added, UTC ISO 8601.</param>
/// <param name="Seal">Its seal, lower-case hexadecimal.</param>
public sealed record SealedEntry(string Entry, string At, string Seal);
