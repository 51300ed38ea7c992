using System.Globalization;
using System.Text.RegularExpressions;
using FakeBench.Faults;
using FakeBench.Fixtures;
using FakeBench.Physics;
using FakeBench.Probes;
using FakeBench.Scpi;

namespace FakeBench.Instruments;

/// <summary>The digitiser: as many inputs as the bench has channels; range and offset in the channel's own
/// unit.</summary>
public sealed partial class Scope : Instrument
{
    /// <summary>Largest record, samples an input.</summary>
    public const int MostPoints = 1_000_000;

    private const int Sweeping = 1 << 3;
    private const int WaitsForTrigger = 1 << 5;
    private const int FewestMargin = 64;
    private const double TimeMargin = 100e-9;

    private static readonly NumericRange Span = new(0.01, 10_000, 10);
    private static readonly NumericRange Offset = new(-10_000, 10_000, 0);
    private static readonly NumericRange Attenuation = new(1e-3, 1e4, 1);
    private static readonly NumericRange Level = new(-10_000, 10_000, 0);
    private static readonly NumericRange Interval = new(0.1e-9, 1e-6, 1e-9, "S");
    private static readonly NumericRange Points = new(16, MostPoints, 10_000);
    private static readonly NumericRange Pretrigger = new(0, 100e-6, 1e-6, "S");

    private readonly ScopeInputs _inputs;
    private readonly int _bits;
    private readonly ScopeFormat _format = new();
    private AcquisitionSettings _settings;
    private AcquisitionSettings? _waiting;
    private ScopeRecord? _record;
    private double _completeAt;
    private long _count;
    private long _immediate;
    private int _blocks;

    /// <summary>Makes a scope.</summary>
    /// <param name="bench">The bench.</param>
    /// <param name="channels">Names of the channels on inputs 1, 2, …</param>
    /// <param name="bits">Bits of its converter, 8 or 12.</param>
    public Scope(Bench bench, IReadOnlyList<string> channels, int bits)
        : base(bench, "scope")
    {
        _inputs = new ScopeInputs(bench, channels);
        _bits = bits;
        _settings = Defaults();
        AddInputs(string.Join('|', Enumerable.Range(1, channels.Count)));
        AddProbes(string.Join('|', Enumerable.Range(1, channels.Count)));
        AddTimeBase();
        AddTrigger();
        AddReadout();
    }

    /// <summary>The samples of a train that the scope needs, whenever within its margin the trigger comes.</summary>
    public Window Window
    {
        get
        {
            AcquisitionSettings s = _waiting ?? _settings;
            int margin = Margin(s);
            return new Window(-s.Pretrigger - (margin * s.Interval), s.Interval, s.Points + (2 * margin));
        }
    }

    /// <summary>A train is fired before the scope's eyes.</summary>
    /// <param name="train">Its samples over <see cref="Window"/>.</param>
    /// <param name="again">Gives the train over a window of the same length that starts elsewhere.</param>
    /// <param name="fire">Count of trains fired.</param>
    public void See(TrainTrajectory train, Func<double, TrainTrajectory> again, long fire)
    {
        ArgumentNullException.ThrowIfNull(again);
        if (_waiting is not { } settings || Bench.Faults.Take(FaultCatalogue.TriggerMissed))
        {
            return;
        }

        Signal source = _inputs.Probes[settings.Source - 1].Signal;
        if (Trigger.Find(train, source, settings.Level, settings.Rising) is not { } at)
        {
            return;
        }

        double start = at - settings.Pretrigger;
        (TrainTrajectory part, double remainder) = Trigger.Cut(train, start, settings.Points)
            ?? Trigger.Cut(again(start - (Margin(settings) * settings.Interval)), start, settings.Points)
            ?? throw new InvalidOperationException("The window does not hold the record.");
        _waiting = null;
        _completeAt = Bench.Faults.Has(FaultCatalogue.NeverCompletes)
            ? double.PositiveInfinity : Bench.Now + (settings.Points * settings.Interval);
        if (Bench.Faults.Take(FaultCatalogue.StaleRecord) && _record is not null)
        {
            return;
        }

        var key = new CaptureKey(Bench.Seed, Bench.Serial, fire);
        double shift = key.Jitter(BenchProbes.TriggerJitter) - remainder;
        Keep(new ScopeRecord(settings, part, _inputs.Now(settings, inTrain: true), key, shift, _bits));
    }

    /// <inheritdoc/>
    protected override void Refresh()
    {
        if (_inputs.Current is { } current && Bench.Faults.Take(FaultCatalogue.ProbeFactorChanges))
        {
            SetInput(current, s => s with { Attenuation = s.Attenuation * FaultCatalogue.FactorChange });
        }

        Scpi.Status.Operation.SetCondition(
            _waiting is not null ? WaitsForTrigger : Bench.Now < _completeAt ? Sweeping : 0);
    }

    /// <inheritdoc/>
    protected override void Foresee(string message)
    {
        if (!message.Contains("TRAC", StringComparison.OrdinalIgnoreCase)
            || message.Contains("PRE", StringComparison.OrdinalIgnoreCase))
        {
            return;
        }

        ScopeRecord? record;
        lock (Bench.Gate)
        {
            record = _record;
        }

        foreach (Match asked in AskedInput().Matches(message))
        {
            if (int.TryParse(asked.Groups[1].Value, out int input) && input >= 1 && input <= _inputs.Probes.Count)
            {
                _ = record?.Codes(input);
            }
        }
    }

    /// <inheritdoc/>
    protected override void Reset()
    {
        _settings = Defaults();
        _waiting = null;
        _format.Reset();
    }

    /// <inheritdoc/>
    protected override Answer Deliver(string message, Reply reply)
    {
        ArgumentNullException.ThrowIfNull(reply);
        _blocks += reply.Blocks;
        if (reply.Blocks > 0)
        {
            Bench.Reached(MomentKind.Block, _blocks);
        }

        return base.Deliver(message, reply);
    }

    [GeneratedRegex("INT(?:ERNAL)?([0-9]{1,3})", RegexOptions.IgnoreCase)]
    private static partial Regex AskedInput();

    private static int Margin(AcquisitionSettings settings) =>
        Math.Max(FewestMargin, (int)Math.Ceiling(TimeMargin / settings.Interval));

    private AcquisitionSettings Defaults() => new(
        Interval.Default,
        (int)Points.Default,
        Pretrigger.Default,
        1,
        Level.Default,
        true,
        [.. _inputs.Probes.Select(p => new InputSettings(Span.Default, Offset.Default, p.Attenuation))]);

    private void AddInputs(string inputs)
    {
        string input = $"[SENSe:]VOLTage<{inputs}>[:DC]:RANGe";
        Scpi.Commands.Number(
            input + "[:UPPer]",
            Span,
            (call, span) => SetInput(call.Suffix, s => s with { Span = span }),
            call => _settings.Inputs[call.Suffix - 1].Span);
        Scpi.Commands.Number(
            input + ":OFFSet",
            Offset,
            (call, offset) => SetInput(call.Suffix, s => s with { Offset = offset }),
            call => _settings.Inputs[call.Suffix - 1].Offset);
    }

    private void AddProbes(string inputs)
    {
        for (int i = 1; i <= _inputs.Probes.Count; i++)
        {
            Scpi.Commands.Number(
                $"INPut<{i}>:ATTenuation",
                Attenuation with { Default = _inputs.Probes[i - 1].Attenuation },
                (call, told) => SetInput(call.Suffix, s => s with { Attenuation = told }),
                call => _settings.Inputs[call.Suffix - 1].Attenuation);
        }

        Scpi.Commands.Event($"INPut<{inputs}>:DEGauss", call => _inputs.Degauss(call.Suffix));
    }

    private void SetInput(int input, Func<InputSettings, InputSettings> change)
    {
        InputSettings[] inputs = [.. _settings.Inputs];
        inputs[input - 1] = change(inputs[input - 1]);
        _settings = _settings with { Inputs = inputs };
    }

    private void AddTimeBase()
    {
        Scpi.Commands.Number(
            "[SENSe:]SWEep:TINTerval",
            Interval,
            (_, interval) => _settings = _settings with { Interval = interval },
            _ => _settings.Interval);
        Scpi.Commands.WholeNumber(
            "[SENSe:]SWEep:POINts",
            Points,
            points => _settings = _settings with { Points = points },
            () => _settings.Points);
        Scpi.Commands.Number(
            "[SENSe:]SWEep:OFFSet:TIME",
            Pretrigger,
            (_, time) => _settings = _settings with { Pretrigger = time },
            _ => _settings.Pretrigger);
        Scpi.Commands.Ask("[SENSe:]SWEep:COUNt:ACTual?", _ => Numbers.Nr1(Count()));
    }

    private void AddTrigger()
    {
        Scpi.Commands.Set(
            "TRIGger[:SEQuence]:SOURce",
            call => _settings = _settings with { Source = call.Numbered("INTernal", _inputs.Probes.Count) });
        Scpi.Commands.Ask(
            "TRIGger[:SEQuence]:SOURce?",
            _ => string.Create(CultureInfo.InvariantCulture, $"INT{_settings.Source}"));
        Scpi.Commands.Number(
            "TRIGger[:SEQuence]:LEVel",
            Level,
            (_, level) => _settings = _settings with { Level = level },
            _ => _settings.Level);
        Scpi.Commands.Set(
            "TRIGger[:SEQuence]:SLOPe",
            call => _settings = _settings with { Rising = call.Choice(0, "POSitive", "NEGative") == "POSitive" });
        Scpi.Commands.Ask("TRIGger[:SEQuence]:SLOPe?", _ => _settings.Rising ? "POS" : "NEG");
        Scpi.Commands.Event("INITiate[:IMMediate][:ALL]", _ => Arm());
        Scpi.Commands.Event("TRIGger[:SEQuence][:IMMediate]", _ => TriggerNow());
        Scpi.Commands.Event("ABORt", _ => _waiting = null);
    }

    private void AddReadout()
    {
        _format.AddTo(Scpi.Commands);
        Scpi.Commands.Add("TRACe:PREamble?", 1, 1, (call, reply) =>
        {
            int input = call.Numbered("INTernal", _inputs.Probes.Count);
            double scale = Bench.Faults.Take(FaultCatalogue.WrongScale) ? 2 : 1;
            reply.Say(_format.Preamble(Record(), input, _bits, Count(), scale));
        });
        Scpi.Commands.Add("TRACe[:DATA]?", 1, 1, (call, reply) =>
        {
            int input = call.Numbered("INTernal", _inputs.Probes.Count);
            _format.Data(Record().Codes(input), _bits, reply);
        });
    }

    private void Arm()
    {
        if (_waiting is not null || Bench.Now < _completeAt)
        {
            throw new ScpiException(-213, "an acquisition is going on");
        }

        _waiting = _settings;
    }

    // Without a train: both gates at their off level, the bus as it stands.
    private void TriggerNow()
    {
        if (_waiting is not { } settings)
        {
            throw new ScpiException(-211, "not armed");
        }

        _waiting = null;
        _completeAt = Bench.Now + (settings.Points * settings.Interval);
        TrainTrajectory rest = HalfBridge.AtRest(
            Bench.HalfBridge,
            Flaws.On(new PulseTrain(0, 0, 0, 0, Bench.GateOff, Bench.BankVoltage), Bench.Faults),
            -settings.Pretrigger,
            settings.Interval,
            settings.Points);
        var key = new CaptureKey(Bench.Seed, Bench.Serial, -++_immediate);
        Keep(new ScopeRecord(settings, rest, _inputs.Now(settings, inTrain: false), key, 0, _bits));
    }

    private void Keep(ScopeRecord record)
    {
        _record = record;
        if (Bench.WorksAhead)
        {
            _record.Prepare();
        }

        _count++;
    }

    private long Count() => Bench.Now < _completeAt ? _count - 1 : _count;

    private ScopeRecord Record() =>
        _waiting is null && Bench.Now >= _completeAt && _record is not null
            ? _record
            : throw new ScpiException(-230, "there is no complete record");
}
