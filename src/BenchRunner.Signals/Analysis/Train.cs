using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>The pulse train of a record: edges, gate levels and the noise of each channel, all in samples.</summary>
internal sealed class Train
{
    private const double GateHysteresisPart = 0.01;
    private const double DeparturePart = 0.1;
    private const int FewestForNoise = 8;
    private const int MostForFirstNoise = 2048;

    private readonly double[] _sigma = new double[ChannelNames.All.Count];

    private Train(string reason)
    {
        Edges = [];
        GateOn = GateOff = Reading.None(reason);
        Absent = reason;
    }

    private Train(GateEdge[] edges) => Edges = edges;

    public IReadOnlyList<GateEdge> Edges { get; }

    public GateEdge? On1 { get; private set; }

    public GateEdge? Off1 { get; private set; }

    public GateEdge? On2 { get; private set; }

    public GateEdge? Off2 { get; private set; }

    /// <summary>Levels that the edges lie between, V; null where the gate does not switch.</summary>
    public TwoLevels? Levels { get; private set; }

    public Reading GateOn { get; private set; }

    public Reading GateOff { get; private set; }

    /// <summary>Why there are no edges at all; null where there are some.</summary>
    public string? Absent { get; }

    public double GateHysteresis { get; private set; }

    /// <summary>Whether the gate's 10 %, at which a turn-on departs, lies within the hysteresis of its off
    /// state.</summary>
    public bool IsDepartureInNoise => Levels is { } levels && DeparturePart * levels.Swing <= GateHysteresis;

    public bool IsTwoPulses =>
        Edges.Count == 4 && Edges[0].Direction == CrossingDirection.Rising;

    /// <summary>Noise of a role's channel (σ), V or A; 0 where it is not measured.</summary>
    public double Sigma(Channel role) => _sigma[(int)role];

    /// <summary>Finds the train in a record.</summary>
    public static Train Find(Record record, AnalysisSettings settings)
    {
        Train train = record.Has(Channel.VgsLow)
            ? FindEdges(record, settings)
            : new Train($"{record.Measured(Channel.VgsLow).Name()} is not measured");
        train.FindNoise(record);
        return train;
    }

    /// <summary>Whole-record levels find the edges first; then one pair of levels around off1 serves all of
    /// them.</summary>
    private static Train FindEdges(Record record, AnalysisSettings settings)
    {
        const Channel gate = Channel.VgsLow;
        Samples samples = record[gate];
        double step = record.Step(gate);
        double sigma = Noise.Sigma(samples, step, Math.Max(1, samples.Length / MostForFirstNoise));
        if (HistogramLevels.Find(samples, sigma, step) is not { } levels)
        {
            return new Train("the gate does not switch");
        }

        Train first = Sort(record, settings, levels, sigma);
        if (first.Off1 is not { } off1)
        {
            first.GateOn = first.GateOff = Reading.None("off1 is outside the record");
            return first;
        }

        double from = ((first.On1?.At ?? 0) + off1.At) / 2;
        double to = (off1.At + (first.On2?.At ?? record.Last)) / 2;
        sigma = first.SigmaOf(record, gate);
        int start = (int)Math.Ceiling(from);
        if (HistogramLevels.Find(samples[start..((int)to + 1)], sigma, step) is not { } refined)
        {
            first.GateOn = first.GateOff = Reading.None("the gate does not switch at off1");
            return first;
        }

        Train train = Sort(record, settings, refined, sigma);
        train.GateOn = Reading.Of(refined.High, from, to);
        train.GateOff = Reading.Of(refined.Low, from, to);
        return train;
    }

    private static Train Sort(Record record, AnalysisSettings settings, TwoLevels levels, double sigma)
    {
        double hysteresis = Math.Max(3 * sigma, GateHysteresisPart * levels.Swing);
        Train train = new(GateEdges.Find(
            record[Channel.VgsLow], record.SampleInterval, levels, hysteresis, settings.DeadTime))
        {
            Levels = levels,
            GateHysteresis = hysteresis,
        };
        train.Name(record);
        return train;
    }

    /// <summary>Says which edge is which; a record may hold a part of the train.</summary>
    private void Name(Record record)
    {
        if (Edges.Count == 0)
        {
            return;
        }

        // A train that begins with a turn-off began inside the first pulse; one that begins with a turn-on and has no
        // third edge is the first pulse, unless the load already carries current when it begins.
        int offset = Edges[0].Direction == CrossingDirection.Falling ? 1
            : Edges.Count < 3 && StartsLoaded(record) ? 2
            : 0;
        On1 = offset == 0 ? Edges[0] : null;
        Off1 = Edge(1 - offset);
        On2 = Edge(2 - offset);
        Off2 = Edge(3 - offset);
    }

    private GateEdge? Edge(int index) => index >= 0 && index < Edges.Count ? Edges[index] : null;

    /// <summary>Whether the current soon after the first turn-on is already most of what it is at the pulse's
    /// end.</summary>
    private bool StartsLoaded(Record record)
    {
        if (!record.Has(Channel.IdLow))
        {
            return false;
        }

        double start = Edges[0].At;
        double end = Edges.Count > 1 ? Edges[1].Departure : record.Last;
        double part = (end - start) / 10;
        if (!(part > 0))
        {
            return false;
        }

        Samples current = record[Channel.IdLow];
        double rest = start > 0 ? Integral.Mean(current, 0, Math.Min(start, Edges[0].Departure)) : 0;
        double early = Integral.Mean(current, start + (2 * part), start + (3 * part)) - rest;
        double late = Integral.Mean(current, end - part, end) - rest;
        return early > 0.5 * late;
    }

    private void FindNoise(Record record)
    {
        foreach (Channel role in ChannelNames.All)
        {
            if (record.Has(role))
            {
                _sigma[(int)role] = SigmaOf(record, role);
            }
        }
    }

    /// <summary>σ before on1; without on1 over the second half of the gap; without either over the whole
    /// record.</summary>
    private double SigmaOf(Record record, Channel role)
    {
        (int from, int to) = QuietPart(record);
        return Noise.Sigma(record[role][from..to], record.Step(role));
    }

    private (int From, int To) QuietPart(Record record)
    {
        if (On1 is { } on1 && on1.Departure >= FewestForNoise)
        {
            return (0, (int)on1.Departure);
        }

        double gapEnd = On2?.Departure ?? record.Last;
        double gapStart = Off1?.At ?? 0;
        bool hasGap = Off1 is not null || On2 is not null;
        int middle = (int)Math.Ceiling((gapStart + gapEnd) / 2);
        return hasGap && gapEnd - middle >= FewestForNoise ? (middle, (int)gapEnd) : (0, record.Count);
    }
}
