using BenchRunner.Signals.Traces;

namespace BenchRunner.Evidence.Captures;

/// <summary>Where one trace lies in its capture's payload.</summary>
/// <param name="Trace">The trace.</param>
/// <param name="Offset">First byte.</param>
/// <param name="Length">Bytes.</param>
/// <param name="Codec">Number of the codec.</param>
/// <param name="Sha256">SHA-256 of the codes as 16-bit little-endian bytes, whatever the codec.</param>
internal sealed record PayloadEntry(RawTrace Trace, int Offset, int Length, int Codec, string Sha256);
