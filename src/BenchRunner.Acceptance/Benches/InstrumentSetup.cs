using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Benches;

/// <summary>How one role's instrument is reached.</summary>
/// <param name="Link">Its link, e.g. <c>tcp 127.0.0.1:5025</c> or <c>serial /dev/ttyUSB0</c>.</param>
/// <param name="Dialect">Name of its dialect, e.g. <c>generic-supply</c>.</param>
/// <param name="Connections">Clients that it serves at once, from 1.</param>
/// <param name="At">Where it is connected; the voltmeter must be at <c>bank</c>; null elsewhere.</param>
/// <param name="Identity">Regular expression that the whole answer to <c>*IDN?</c> must match; null: any instrument of
/// its kind.</param>
/// <param name="Where">Where it stands in the file.</param>
public sealed record InstrumentSetup(
    string Link, string Dialect, int Connections, string? At, string? Identity, Place Where);
