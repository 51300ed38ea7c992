using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Comparisons;

/// <summary>The quantities of two waveforms by the same definitions.</summary>
/// <remarks>A definition that names no route to the diode's current takes the one that both records can go.</remarks>
internal sealed class ScalarSet
{
    private static readonly string[] _usual =
    [
        "vds_high_peak_1", "vds_high_peak_2", "vds_high_peak_3", "irm", "trr", "qrr", "ring_frequency", "ring_damping",
    ];

    private readonly Waveform _measured;
    private readonly Waveform _reference;
    private readonly AnalysisSettings _measuredSettings;
    private readonly AnalysisSettings _referenceSettings;
    private readonly bool _byLoadLine;
    private readonly Dictionary<string, ScalarComparison> _chosen = [];

    /// <summary>Analyses both waveforms.</summary>
    public ScalarSet(
        Waveform measured, AnalysisSettings measuredSettings, Waveform reference, AnalysisSettings referenceSettings)
    {
        _measured = measured;
        _reference = reference;
        _byLoadLine = !(HasDiodeCurrent(measured, measuredSettings) && HasDiodeCurrent(reference, referenceSettings));
        Dictionary<string, string> definitions = [];
        foreach (Quantity quantity in QuantityCatalogue.All)
        {
            if (measuredSettings.Definitions.TryGetValue(quantity.Name, out string? asked))
            {
                definitions[quantity.Name] = Routed(quantity, asked);
            }
            else if (quantity.Definitions[0].HasRoutes)
            {
                definitions[quantity.Name] = Routed(quantity, quantity.DefaultFor(measuredSettings.Kind));
            }
        }

        _measuredSettings = Chosen(measuredSettings);
        _referenceSettings = Chosen(referenceSettings) with { Kind = measuredSettings.Kind };
        Measured = WaveformAnalysis.Analyse(measured, _measuredSettings, out Waveform corrected);
        Reference = WaveformAnalysis.Analyse(reference, _referenceSettings, out Waveform correctedReference);
        (MeasuredTraces, ReferenceTraces) = (corrected, correctedReference);
        for (int i = 0; i < Measured.Quantities.Count; i++)
        {
            ScalarComparison one = ScalarComparison.Form(Measured.Quantities[i], Reference.Quantities[i]);
            _chosen[one.Quantity] = one;
        }

        AnalysisSettings Chosen(AnalysisSettings settings) =>
            settings with { Definitions = definitions, EveryDefinition = false, Quantities = null };
    }

    /// <summary>What the measured waveform says.</summary>
    public AnalysisResult Measured { get; }

    /// <summary>What the reference says.</summary>
    public AnalysisResult Reference { get; }

    /// <summary>The measured waveform, corrected.</summary>
    public Waveform MeasuredTraces { get; }

    /// <summary>The reference, corrected.</summary>
    public Waveform ReferenceTraces { get; }

    /// <summary>One quantity, by the definition that is asked for.</summary>
    public ScalarComparison Find(ScalarName name)
    {
        Quantity quantity = QuantityCatalogue.Find(name.Quantity)
            ?? throw new ArgumentException($"There is no quantity '{name.Quantity}'.", nameof(name));
        ScalarComparison chosen = _chosen[name.Quantity];
        if (name.Definition is null || Routed(quantity, name.Definition) is var id && id == chosen.Definition)
        {
            return chosen;
        }

        return ScalarComparison.Form(
            Again(_measured, _measuredSettings, quantity, id), Again(_reference, _referenceSettings, quantity, id));
    }

    /// <summary>The usual quantities always, then each other one that both have; without those given.</summary>
    public IReadOnlyList<ScalarComparison> Others(IReadOnlyList<ScalarComparison> given) =>
    [
        .. _usual.Concat(QuantityCatalogue.All.Select(quantity => quantity.Name).Except(_usual))
            .Select(name => _chosen[name])
            .Where(one => !given.Contains(one) && (one.RelativeError is not null || _usual.Contains(one.Quantity))),
    ];

    private static QuantityValue Again(
        Waveform waveform, AnalysisSettings settings, Quantity quantity, string definition) =>
        WaveformAnalysis.Analyse(
            waveform,
            settings with
            {
                Quantities = new HashSet<string> { quantity.Name },
                Definitions = new Dictionary<string, string>(settings.Definitions) { [quantity.Name] = definition },
            }).Quantities.Single();

    private static bool HasDiodeCurrent(Waveform waveform, AnalysisSettings settings) =>
        waveform.Has(settings.Position == DevicePosition.High ? Channel.IdLow : Channel.IdHigh);

    private string Routed(Quantity quantity, string definition) =>
        _byLoadLine && quantity.Find(definition) is { HasRoutes: true } && !DefinitionId.Split(definition).ByLoadLine
            ? definition + DefinitionId.LoadLineRoute
            : definition;
}
