using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>What can be said about the validity of a waveform from a file, which has neither plan nor bench.</summary>
public static class WaveformFindings
{
    /// <summary>Judges a waveform by the criteria that need no facts beside it, with their default bounds.</summary>
    /// <param name="waveform">The waveform as recorded.</param>
    /// <param name="analysis">What the analysis found in it.</param>
    /// <param name="settings">What the analysis took as given.</param>
    /// <returns>Findings, and every other criterion as not evaluated.</returns>
    public static Verdict Judge(Waveform waveform, AnalysisResult analysis, AnalysisSettings settings)
    {
        ArgumentNullException.ThrowIfNull(waveform);
        ArgumentNullException.ThrowIfNull(analysis);
        ArgumentNullException.ThrowIfNull(settings);
        bool firesHigh = settings.Position == DevicePosition.High;
        TrainFacts train = analysis.Train;
        Channel gate = HalfBridge.Playing(Channel.VgsLow, firesHigh);
        Channel heldOff = HalfBridge.Playing(Channel.VgsHigh, firesHigh);
        var findings = new List<Finding>(Clipped(waveform));
        var evaluated = new HashSet<string> { Criteria.NotClipped };
        Take(Criteria.TwoPulses, (waveform.Has(gate), train.IsTwoPulses ? null : WaveformCriteria.Edges(train, gate)));
        Take(Criteria.RampStraightness, WaveformCriteria.RampStraightness(
            train, new ValidityBounds().RampStraightness, HalfBridge.Playing(Channel.IdLow, firesHigh)));
        Take(Criteria.HighSideOff, WaveformCriteria.HighSideOff(
            GateRecord.Of(waveform, heldOff, settings.Corrections.GetValueOrDefault(heldOff)),
            heldOff, analysis, settings.HighSideThreshold));
        Take(Criteria.Desaturated, WaveformCriteria.Desaturated(
            train, onVoltage: 0, HalfBridge.Playing(Channel.VdsLow, firesHigh)));
        return new Verdict(
            findings,
            [.. Criteria.All.Select(criterion => criterion.Name).Where(name => !evaluated.Contains(name))],
            null,
            new Dictionary<Channel, bool>());

        void Take(string criterion, (bool Evaluated, Finding? Found) answer)
        {
            if (answer.Evaluated)
            {
                evaluated.Add(criterion);
                findings.AddRange(answer.Found is { } found ? [found] : []);
            }
        }
    }

    /// <summary>A file marks a clipped sample as an infinity or as not a number.</summary>
    private static IEnumerable<Finding> Clipped(Waveform waveform)
    {
        foreach (Channel channel in waveform.Channels)
        {
            int clipped = 0;
            int first = 0;
            for (int i = 0; i < waveform.Count; i++)
            {
                if (!double.IsFinite(waveform[channel][i]))
                {
                    first = clipped++ == 0 ? i : first;
                }
            }

            if (clipped > 0)
            {
                double at = waveform.TimeAt(first);
                yield return new Finding(
                    Criteria.NotClipped, FindingClass.Retry, channel, clipped, 0, at,
                    $"{channel.Name()} has {clipped} clipped samples (infinity or not a number) from "
                    + $"{Files.SiText.Format(at, "s")}; take it again with a wider range");
            }
        }
    }
}
