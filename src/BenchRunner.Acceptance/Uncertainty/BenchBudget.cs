using BenchRunner.Acceptance.Benches;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Uncertainty;

/// <summary>The type B budget of every quantity at an operating point, from the bench file and one capture.</summary>
/// <remarks>
/// Sensitivities are central differences through the analysis itself: the capture is analysed again with each stated
/// error a standard uncertainty larger and smaller. The same error is in all captures of a point, so it does not shrink
/// with their number. A code's rounding (LSB/√12 over the bits that count) acts as an offset: high for means, right for
/// peaks.
/// </remarks>
public sealed class BenchBudget
{
    private readonly Dictionary<(string Quantity, string Definition), QuantityBudget> _budgets;

    private BenchBudget(Dictionary<(string Quantity, string Definition), QuantityBudget> budgets) => _budgets = budgets;

    /// <summary>The budgets, in the order of the analysis.</summary>
    public IReadOnlyCollection<QuantityBudget> All => _budgets.Values;

    /// <summary>Forms the budget.</summary>
    /// <param name="traces">The traces of a valid capture; the first valid one of a point, so that rescoring takes the
    /// same.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="settings">What the analysis takes as given.</param>
    /// <exception cref="ArgumentException">The traces are not one capture.</exception>
    public static BenchBudget Of(IReadOnlyList<RawTrace> traces, Bench bench, AnalysisSettings settings)
    {
        ArgumentNullException.ThrowIfNull(traces);
        ArgumentNullException.ThrowIfNull(bench);
        ArgumentNullException.ThrowIfNull(settings);
        AnalysisResult centre = WaveformAnalysis.Analyse(traces, settings);
        var entries = centre.Quantities.Select(_ => new List<UncertaintyEntry>()).ToArray();
        string?[] reasons = new string?[entries.Length];
        foreach (ChannelSetup setup in bench.Channels)
        {
            if (traces.FirstOrDefault(one => one.Channel == setup.Channel) is not { } trace)
            {
                continue;
            }

            double rounding = trace.FullScale / Math.Pow(2, bench.ScopeBits) / Math.Sqrt(12);
            string name = setup.Channel.Name();
            ChannelCorrection stated = Stated(settings, setup.Channel, centre.Train);
            Vary($"{name} gain", setup.GainUncertainty, setup.GainUncertainty, u =>
                stated with { Gain = stated.Gain * (1 + u) });
            double[] perOffset = Vary(
                $"{name} offset", setup.OffsetUncertainty, Math.Max(setup.OffsetUncertainty, rounding),
                u => stated with { Offset = stated.Offset + u });
            Vary($"{name} skew", setup.SkewUncertainty, setup.SkewUncertainty, u =>
                stated with { Skew = stated.Skew + u });
            for (int i = 0; i < entries.Length; i++)
            {
                entries[i].Add(new UncertaintyEntry($"{name} quantisation", rounding, perOffset[i]));
            }

            double[] Vary(string source, double standard, double step, Func<double, ChannelCorrection> by)
            {
                double[] sensitivities = Sensitivities(traces, settings, centre, setup.Channel, step, by);
                for (int i = 0; i < entries.Length; i++)
                {
                    entries[i].Add(new UncertaintyEntry(source, standard, sensitivities[i]));
                    reasons[i] ??= double.IsNaN(sensitivities[i]) ? $"no sensitivity to {source}" : null;
                }

                return sensitivities;
            }
        }

        var budgets = new Dictionary<(string Quantity, string Definition), QuantityBudget>();
        for (int i = 0; i < entries.Length; i++)
        {
            QuantityValue value = centre.Quantities[i];
            budgets[(value.Quantity, value.Definition)] = new QuantityBudget(
                value.Quantity, value.Definition, entries[i], value.Reason ?? reasons[i]);
        }

        return new BenchBudget(budgets);
    }

    /// <summary>The budget of one quantity; null where the capture gave none.</summary>
    /// <param name="quantity">The quantity.</param>
    /// <param name="definition">Its definition ID, route included.</param>
    public QuantityBudget? Find(string quantity, string definition) =>
        _budgets.GetValueOrDefault((quantity, definition));

    /// <summary>
    /// The stated error of a channel; a current's offset that is not stated is what the analysis takes for it.
    /// </summary>
    private static ChannelCorrection Stated(AnalysisSettings settings, Channel channel, TrainFacts train)
    {
        ChannelCorrection stated = settings.Corrections.GetValueOrDefault(channel) ?? new ChannelCorrection();
        bool fires = channel == (settings.Position == DevicePosition.High ? Channel.IdHigh : Channel.IdLow);
        return stated with
        {
            Offset = stated.Offset ?? (fires ? (train.CurrentBeforeOn1 ?? 0) * stated.Gain : 0),
        };
    }

    /// <summary>Change of each quantity over the change of one error; 0 where the error is stated as 0, NaN where none
    /// could be formed.</summary>
    private static double[] Sensitivities(
        IReadOnlyList<RawTrace> traces,
        AnalysisSettings settings,
        AnalysisResult centre,
        Channel channel,
        double step,
        Func<double, ChannelCorrection> by)
    {
        if (step <= 0)
        {
            return new double[centre.Quantities.Count];
        }

        AnalysisResult above = WaveformAnalysis.Analyse(traces, With(settings, channel, by(step)));
        AnalysisResult below = WaveformAnalysis.Analyse(traces, With(settings, channel, by(-step)));
        double[] sensitivities = new double[centre.Quantities.Count];
        for (int i = 0; i < sensitivities.Length; i++)
        {
            // Where one side has no value (a level just reached), the other side's difference must do.
            double? middle = centre.Quantities[i].Value;
            double? high = above.Quantities[i].Value;
            double? low = below.Quantities[i].Value;
            sensitivities[i] = (high, low) switch
            {
                ({ } h, { } l) => (h - l) / (2 * step),
                ({ } h, null) when middle is { } m => (h - m) / step,
                (null, { } l) when middle is { } m => (m - l) / step,
                _ => double.NaN,
            };
        }

        return sensitivities;
    }

    private static AnalysisSettings With(AnalysisSettings settings, Channel channel, ChannelCorrection correction) =>
        settings with
        {
            Corrections = new Dictionary<Channel, ChannelCorrection>(settings.Corrections) { [channel] = correction },
        };
}
