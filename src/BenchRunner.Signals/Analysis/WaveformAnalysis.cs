using BenchRunner.Signals.Corrections;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>What a waveform says: facts about its pulse train, and every quantity of the catalogue.</summary>
/// <remarks>Pure: the same waveform and settings give the same bits, on every thread.</remarks>
public static class WaveformAnalysis
{
    /// <summary>Corrects a waveform and forms every quantity.</summary>
    /// <param name="waveform">The record as it came; an infinity or NaN is a clipped sample. Not modified.</param>
    /// <param name="settings">What is taken as given.</param>
    /// <returns>Facts and quantities in the catalogue's order; a quantity that cannot be formed has a reason.</returns>
    /// <exception cref="ArgumentException">A stated correction cannot be undone: a gain of 0, a shunt without
    /// resistance.
    /// </exception>
    /// <remarks>
    /// Corrections first, once, in their order; then the gate's edges, the levels, the load current, and what rests on
    /// them. A quantity whose interval holds a clipped sample of a channel it needs has no value.
    /// </remarks>
    public static AnalysisResult Analyse(Waveform waveform, AnalysisSettings settings) =>
        Analyse(waveform, settings, out _);

    /// <summary>The same, and the corrected traces from which the quantities were read.</summary>
    internal static AnalysisResult Analyse(Waveform waveform, AnalysisSettings settings, out Waveform rested)
    {
        ArgumentNullException.ThrowIfNull(waveform);
        ArgumentNullException.ThrowIfNull(settings);
        using SampleBuffers buffers = new();
        return Analyse(waveform, settings, buffers, out rested);
    }

    /// <summary>Corrects a capture as the scope gave it, and forms every quantity.</summary>
    /// <param name="traces">One trace a channel, on one time base; at least one.</param>
    /// <param name="settings">What is taken as given.</param>
    /// <returns>Facts and quantities in the catalogue's order; a quantity that cannot be formed has a reason.</returns>
    /// <exception cref="ArgumentException">No trace, a channel twice, traces of different length or time base, or a
    /// stated correction that cannot be undone.</exception>
    /// <remarks>What <see cref="Analyse(Waveform, AnalysisSettings)"/> says of the same capture converted, to the last
    /// bit, without fresh memory for its samples.</remarks>
    public static AnalysisResult Analyse(IReadOnlyList<RawTrace> traces, AnalysisSettings settings)
    {
        ArgumentNullException.ThrowIfNull(settings);
        using SampleBuffers buffers = new();
        return Analyse(TraceConversion.ToWaveform(traces, buffers), settings, buffers, out _);
    }

    private static AnalysisResult Analyse(
        Waveform waveform, AnalysisSettings settings, SampleBuffers buffers, out Waveform rested)
    {
        Clipping clipping = new(waveform, settings);
        Waveform recorded = clipping.Bridge(waveform, isCorrected: false);
        Waveform corrected = clipping.Bridge(Correction.Correct(recorded, settings), isCorrected: true);
        Record record = new(corrected, clipping, settings);
        Train train = Train.Find(record, settings);
        rested = Baseline.Remove(corrected, record, train, settings, out BaselineSource baseline);
        Analyser analyser = new(new Record(rested, clipping, settings), train, settings, buffers);
        TrainFacts facts = TrainReport.Form(analyser, recorded, settings) with { Baseline = baseline };
        return new AnalysisResult(facts, FormAll(analyser, settings));
    }

    private static List<QuantityValue> FormAll(Analyser analyser, AnalysisSettings settings)
    {
        QuantityForming forming = new(analyser, settings);
        List<QuantityValue> values = new(settings.EveryDefinition ? 128 : QuantityCatalogue.All.Count);
        foreach (Quantity quantity in QuantityCatalogue.All)
        {
            if (settings.Quantities is { } wanted && !wanted.Contains(quantity.Name))
            {
                continue;
            }

            if (settings.EveryDefinition)
            {
                AddEvery(values, forming, analyser, quantity, settings);
            }
            else
            {
                string id = Chosen(quantity, analyser.Record, settings);
                values.Add(Form(forming, analyser, quantity, id));
            }
        }

        return values;
    }

    private static void AddEvery(
        List<QuantityValue> values,
        QuantityForming forming,
        Analyser analyser,
        Quantity quantity,
        AnalysisSettings settings)
    {
        foreach (QuantityDefinition definition in quantity.Definitions)
        {
            string id = definition.Id;
            if (id == DefinitionId.WindowTemplate)
            {
                if (settings.IntegrationTime is not { } time)
                {
                    continue;
                }

                id = DefinitionId.Window(time);
            }

            if (!definition.HasRoutes || analyser.Record.Has(Channel.IdHigh))
            {
                values.Add(Form(forming, analyser, quantity, id));
            }

            if (definition.HasRoutes)
            {
                values.Add(Form(forming, analyser, quantity, id + DefinitionId.LoadLineRoute));
            }
        }
    }

    /// <summary>The definition that is asked for, else the default; its route, where none is named, the
    /// bench's.</summary>
    private static string Chosen(Quantity quantity, Record record, AnalysisSettings settings)
    {
        if (!settings.Definitions.TryGetValue(quantity.Name, out string? id))
        {
            id = quantity.DefaultFor(settings.Kind);
            if (id == "levels/window" && quantity.Name == "bus_voltage" && !record.Has(Channel.Vbus))
            {
                id = "levels/window-vds";
            }
        }

        bool needsRoute = quantity.Find(id) is { HasRoutes: true } && !DefinitionId.Split(id).ByLoadLine;
        return needsRoute && !record.Has(Channel.IdHigh) ? id + DefinitionId.LoadLineRoute : id;
    }

    private static QuantityValue Form(QuantityForming forming, Analyser analyser, Quantity quantity, string id)
    {
        Reading reading = Read(forming, analyser, quantity, id);
        return reading.HasValue
            ? new QuantityValue(
                quantity.Name,
                id,
                reading.Value,
                quantity.Unit,
                null,
                analyser.Record.TimeAt(reading.From),
                analyser.Record.TimeAt(reading.To))
            {
                PerSkew = forming.PerSkew(quantity.Name, reading, DefinitionId.Split(id).ByLoadLine),
            }
            : new QuantityValue(quantity.Name, id, null, quantity.Unit, reading.Reason, null, null);
    }

    private static Reading Read(QuantityForming forming, Analyser analyser, Quantity quantity, string id)
    {
        if (quantity.Find(id) is not { } definition)
        {
            return Reading.None($"{quantity.Name} has no definition {id}");
        }

        (string rule, bool byLoadLine) = DefinitionId.Split(id);
        Record record = analyser.Record;
        foreach (Channel channel in definition.Channels)
        {
            if (!record.Has(Routed(channel, byLoadLine)))
            {
                return Reading.None($"{record.Measured(Routed(channel, byLoadLine)).Name()} is not measured");
            }
        }

        Reading reading = forming.Form(quantity.Name, rule, byLoadLine);
        foreach (Channel channel in definition.Channels)
        {
            if (reading.HasValue && record.IsClipped(Routed(channel, byLoadLine), reading.From, reading.To))
            {
                return Reading.None($"{record.Measured(Routed(channel, byLoadLine)).Name()} is clipped");
            }
        }

        return reading;
    }

    private static Channel Routed(Channel channel, bool byLoadLine) =>
        byLoadLine && channel == Channel.IdHigh ? Channel.IdLow : channel;
}
