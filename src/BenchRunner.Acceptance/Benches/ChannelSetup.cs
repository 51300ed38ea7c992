using BenchRunner.Acceptance.Files;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Benches;

/// <summary>One recorded channel: scope input, probe, stated errors and their standard uncertainties.</summary>
/// <param name="Channel">What it sees.</param>
/// <param name="Input">The scope's channel number, from 1.</param>
/// <param name="Probe">Kind of probe: <c>ground-referenced</c>, <c>differential</c>, <c>isolated</c>, <c>shunt</c>,
/// <c>coil</c>, <c>transformer</c> or <c>clamp</c>.</param>
/// <param name="Rating">Highest voltage (or current) of the probe, V or A; null: not stated.</param>
/// <param name="Gain">Stated gain: recorded = gain · true + offset.</param>
/// <param name="Offset">Stated offset, V or A; null: not stated.</param>
/// <param name="Skew">Stated delay beyond the probe's own, s.</param>
/// <param name="GainUncertainty">Standard uncertainty of the gain, 1 (relative).</param>
/// <param name="OffsetUncertainty">Standard uncertainty of the offset, V or A.</param>
/// <param name="SkewUncertainty">Standard uncertainty of the skew, s.</param>
/// <param name="Where">Where it stands in the file.</param>
public sealed record ChannelSetup(
    Channel Channel,
    int Input,
    string Probe,
    double? Rating,
    double Gain,
    double? Offset,
    double Skew,
    double GainUncertainty,
    double OffsetUncertainty,
    double SkewUncertainty,
    Place Where)
{
    /// <summary>The probe that keeps a field after a current and must be degaussed: <c>clamp</c>.</summary>
    public const string Clamp = "clamp";

    /// <summary>Highest voltage to earth that the probe's inputs bear, V; null: not stated.</summary>
    public double? CommonMode { get; init; }

    /// <summary>Bandwidth of the probe (−3 dB), Hz; null: not stated.</summary>
    public double? Bandwidth { get; init; }

    /// <summary>Delay of the probe by its data sheet, s; the skew comes on top.</summary>
    public double Delay { get; init; }

    /// <summary>Attenuation that the scope is told and must say when asked back, 1; null: it is not asked.</summary>
    public double? Attenuation { get; init; }

    /// <summary>The stated error, which the analysis undoes: gain, offset, and delay and skew together.</summary>
    public ChannelCorrection Correction => new(Gain, Offset, Delay + Skew);
}
