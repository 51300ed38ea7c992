using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.LoadCurrent;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Recovery;
using BenchRunner.Signals.RingWindows;
using BenchRunner.Signals.Switching;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>Levels, fits and events of one record that several quantities share, each formed once.</summary>
internal sealed class Analyser
{
    private const double QuietPart = 0.25;
    private const double TimeConstants = 5;
    private const double AfterRecovery = 20e-9;
    private const int MostPasses = 3;
    private const double SettledPart = 0.02;

    private readonly AnalysisSettings _settings;
    private LoadLine _line;
    private readonly SampleBuffers _buffers;
    private double[]? _irr;
    private RingWindow? _ringId;
    private RingWindow? _ringOff;

    public Analyser(Record record, Train train, AnalysisSettings settings, SampleBuffers buffers)
    {
        _buffers = buffers;
        Record = record;
        Train = train;
        _settings = settings;
        BusWindowed = train.On2 is { } on2 ? MeanBefore(Channel.Vbus, on2.Departure) : Outside("on2");
        BusFromVds = FormBusFromVds();
        Bus = BusFor(settings.Definitions.GetValueOrDefault("bus_voltage")
            ?? (record.Has(Channel.Vbus) ? "levels/window" : "levels/window-vds"));
        OnStateOff1 = FormOnState(train.On1, train.Off1, "off1");
        OnStateOn2 = train.Off2 is null ? FormOnStateAtEnd() : FormOnState(train.On2, train.Off2, "on2");
        Ramp = FormRamp();
        RingOn = FormRingOn();
        OnCurrent = FormLoadLine();
    }

    public Record Record { get; }

    public Train Train { get; }

    public Reading Bus { get; }

    public Reading BusWindowed { get; }

    public Reading BusFromVds { get; }

    public Reading OnStateOff1 { get; }

    public Reading OnStateOn2 { get; }

    public FirstRamp Ramp { get; }

    public Reading OnCurrent { get; }

    /// <summary>Ringing of vds_high after on2.</summary>
    public RingWindow? RingOn { get; }

    /// <summary>Ringing of id_low after on2.</summary>
    public RingWindow? RingId => _ringId ??= RingOn is { } voltage && Record.Has(Channel.IdLow)
        ? RingWindow.Along(
            Record[Channel.IdLow].Values, Record.SampleInterval, voltage, Train.Sigma(Channel.IdLow), EndOfOn2)
        : null;

    /// <summary>Ringing of vds_low after off1.</summary>
    public RingWindow? RingOff => _ringOff ??= Train.Off1 is { } off1 && Bus.HasValue
        ? RingWindow.AboveBus(
            Record[Channel.VdsLow].Values,
            Record.SampleInterval,
            Bus.Value,
            Train.Sigma(Channel.VdsLow),
            off1.Departure,
            EndOfOff1)
        : null;

    /// <summary>End of the search for events of off1, in samples.</summary>
    public double EndOfOff1 => Train.On2?.Departure ?? Record.Last;

    /// <summary>End of the search for events of on2, in samples.</summary>
    public double EndOfOn2 => Train.Off2?.Departure ?? Record.Last;

    /// <summary>First sample of the stretch over which irr is formed.</summary>
    public int RecoveryOrigin => Train.On2 is { } on2 ? Math.Max(0, (int)on2.Departure - 1) : 0;

    /// <summary>Samples of that stretch.</summary>
    public int RecoveryLength => (int)Math.Floor(EndOfOn2) - RecoveryOrigin + 1;

    /// <summary>The second turn-on.</summary>
    public SwitchingEvent TurnOn(Reading current) => new()
    {
        Vds = Record[Channel.VdsLow],
        Id = Record[Channel.IdLow],
        SampleInterval = Record.SampleInterval,
        TurnsOn = true,
        Departure = Train.On2?.Departure ?? 0,
        End = EndOfOn2,
        Bus = Bus,
        OnState = OnStateOn2,
        Current = current,
        VoltageNoise = Train.Sigma(Channel.VdsLow),
        CurrentNoise = Train.Sigma(Channel.IdLow),
    };

    /// <summary>The first turn-off.</summary>
    public SwitchingEvent TurnOff() => new()
    {
        Vds = Record[Channel.VdsLow],
        Id = Record[Channel.IdLow],
        SampleInterval = Record.SampleInterval,
        TurnsOn = false,
        Departure = Train.Off1?.Departure ?? 0,
        End = EndOfOff1,
        Bus = Bus,
        OnState = OnStateOff1,
        Current = Ramp.OffCurrent,
        VoltageNoise = Train.Sigma(Channel.VdsLow),
        CurrentNoise = Train.Sigma(Channel.IdLow),
    };

    /// <summary>The recovery by one of the two routes, in positions from <see cref="RecoveryOrigin"/>.</summary>
    public RecoveryEvent Recovery(bool byLoadLine)
    {
        int origin = RecoveryOrigin;
        ReadOnlySpan<double> irr = byLoadLine
            ? _irr.AsSpan(0, RecoveryLength)
            : Record[Channel.IdHigh].Values.Slice(origin, RecoveryLength);
        Channel current = byLoadLine ? Channel.IdLow : Channel.IdHigh;
        return new RecoveryEvent(
            irr,
            Record.SampleInterval,
            (Train.On2?.Departure ?? 0) - origin,
            EndOfOn2 - origin,
            Train.Sigma(current),
            Record.Step(current));
    }

    /// <summary>Mean of a channel in the 200 ns before a position, or in what the record holds of them.</summary>
    public Reading MeanBefore(Channel role, double position) => Record.Has(role)
        ? Record.Unclipped(role, BusVoltage.Before(Record[role], Record.SampleInterval, position))
        : Reading.None($"{Record.Measured(role).Name()} is not measured");

    /// <summary>The reading of a quantity whose edge is not in the record.</summary>
    public Reading Outside(string edge) => Reading.None(Train.Absent ?? $"{edge} is outside the record");

    /// <summary>Bus voltage by a definition.</summary>
    public Reading BusFor(string definition) => definition switch
    {
        "levels/window" => BusWindowed,
        "levels/window-vds" => BusFromVds,
        _ => Reading.None($"bus_voltage has no definition {definition}"),
    };

    private Reading FormBusFromVds() => Train.On2 is { } on2
        ? BusVoltage.FromBlocking(MeanBefore(Channel.VdsLow, on2.Departure), _settings.ForwardVoltage)
        : Outside("on2");

    private Reading FormOnState(GateEdge? on, GateEdge? off, string edge) =>
        !Record.Has(Channel.VdsLow) ? Reading.None($"{Record.Measured(Channel.VdsLow).Name()} is not measured")
        : off is not { } end || (on is null && edge == "on2") ? Outside(edge)
        : Record.Unclipped(
            Channel.VdsLow, OnState.Form(Record[Channel.VdsLow], on?.At ?? 0, end.At, end.Departure));

    /// <summary>The on state of a second pulse that goes on beyond the record, which may end before vds has come
    /// down.</summary>
    private Reading FormOnStateAtEnd()
    {
        GateEdge end = new(Record.Last, Record.Last, CrossingDirection.Falling);
        Reading state = FormOnState(Train.On2, end, "on2");
        if (!state.HasValue || !Bus.HasValue)
        {
            return state;
        }

        Reading before = FormOnState(Train.On2, end with { Departure = state.From }, "on2");
        double moved = before.Value - state.Value;
        bool isDown = before.HasValue && state.Value < Bus.Value / 2
            && moved <= (3 * Train.Sigma(Channel.VdsLow)) + (SettledPart * Bus.Value);
        return !isDown
            ? Reading.None("the record ends while vds falls")
            : state;
    }

    private FirstRamp FormRamp() =>
        !Record.Has(Channel.IdLow) ? FirstRamp.Without($"{Record.Measured(Channel.IdLow).Name()} is not measured")
        : Train.Off1 is not { } off1 ? FirstRamp.Without(Outside("off1").Reason!)
        : Unclipped(FirstRamp.Fit(
            Record[Channel.IdLow], Record.SampleInterval, Train.On1?.At, off1.At, off1.Departure));

    private FirstRamp Unclipped(FirstRamp ramp) =>
        Record.Unclipped(Channel.IdLow, ramp.OffCurrent) is { HasValue: false } none
            ? FirstRamp.Without(none.Reason!)
            : ramp;

    private RingWindow? FormRingOn() =>
        Train.On2 is { } on2 && Bus.HasValue && Record.Has(Channel.VdsHigh)
            ? RingWindow.AboveBus(
                Record[Channel.VdsHigh].Values,
                Record.SampleInterval,
                Bus.Value,
                Train.Sigma(Channel.VdsHigh),
                on2.Departure,
                EndOfOn2)
            : null;

    /// <summary>Fits the load line; where its start hangs on trr and trr on the line, a few passes settle
    /// both.</summary>
    private Reading FormLoadLine()
    {
        if (Train.On2 is not { } on2)
        {
            return Outside("on2");
        }

        if (!Record.Has(Channel.IdLow) || !Record.Has(Channel.VdsLow))
        {
            return Reading.None("vds and current of the switch are not both measured");
        }

        Instant knee = TurnOn(Reading.None("not formed yet")).Voltage(0.5, decided: false);
        if (knee.Reason is not null)
        {
            return Reading.None(knee.Reason);
        }

        bool rings = RingOn is { Reason: null };
        double dt = Record.SampleInterval;
        double start = rings
            ? on2.At + (TimeConstants / (RingOn!.Mode.Decay * dt))
            : on2.At + (QuietPart * ((Train.Off2?.At ?? Record.Last) - on2.At));
        if (Train.Off2 is null)
        {
            // The record may end amid the recovery, which never ends before the voltage has fallen.
            start = Math.Max(start, knee.At + (AfterRecovery / dt));
        }

        double? slope = Ramp.Slope.HasValue ? Ramp.Slope.Value * dt : null;
        for (int pass = 1; ; pass++)
        {
            _line = LoadLine.Fit(
                Record[Channel.IdLow],
                on2.At,
                Train.Off2?.At,
                knee.At,
                start,
                slope,
                Train.Sigma(Channel.IdLow),
                out string? reason);
            if (reason is not null)
            {
                _irr = null;
                return Reading.None(reason);
            }

            FormIrr();
            if (!Finite.All(_irr.AsSpan(0, RecoveryLength)))
            {
                _irr = null;
                return Reading.None("the load-current line is not a finite number");
            }

            Instant end = RecoveryTime.ChordEnd(Recovery(byLoadLine: true));
            double over = end.At + RecoveryOrigin + (AfterRecovery / dt);
            bool isStated = !rings && Train.Off2 is not null;
            if (isStated || end.Reason is not null || over <= start || pass == MostPasses)
            {
                return Record.Unclipped(Channel.IdLow, _line.ToReading());
            }

            start = over;
        }
    }

    /// <summary>irr = id − iL over the second pulse.</summary>
    private void FormIrr()
    {
        int origin = RecoveryOrigin;
        int length = RecoveryLength;
        _irr ??= _buffers.Rent(length);
        ReadOnlySpan<double> current = Record[Channel.IdLow].Values.Slice(origin, length);
        Span<double> irr = _irr.AsSpan(0, length);
        for (int i = 0; i < length; i++)
        {
            irr[i] = current[i] - _line.At(origin + i);
        }
    }
}
