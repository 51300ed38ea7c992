using FakeBench.Faults;
using FakeBench.Fixtures;
using FakeBench.Physics;
using FakeBench.Scpi;

namespace FakeBench.Instruments;

/// <summary>The gate pulser: a train of two pulses, armed, then fired once.</summary>
/// <remarks>With its output off both gates are held at their off level. An armed pulser whose settings change is
/// disarmed.</remarks>
public sealed class Pulser : Instrument
{
    private const int WaitsForTrigger = 1 << 5;

    private static readonly NumericRange Width = new(50e-9, 100e-6, 1e-6, "S");
    private static readonly NumericRange High = new(0, 25, 15, "V");
    private static readonly NumericRange Low = new(-15, 5, 0, "V");

    private readonly Scope _scope;
    private readonly TrainCache _trains;
    private double _first;
    private double _gap;
    private double _second;
    private double _on;
    private bool _output;
    private bool _armed;
    private long _count;
    private bool _silent;

    /// <summary>Makes a pulser.</summary>
    /// <param name="bench">The bench.</param>
    /// <param name="scope">The scope that sees its trains.</param>
    /// <param name="trains">Where trains are computed.</param>
    public Pulser(Bench bench, Scope scope, TrainCache trains)
        : base(bench, "pulser")
    {
        (_scope, _trains) = (scope, trains);
        bench.ChainOpened += () => _armed = false;
        Reset();
        CommandTree commands = Scpi.Commands;
        commands.Number("[SOURce:]PULSe<1|2>:WIDTh", Width, SetWidth, call => call.Suffix == 1 ? _first : _second);
        commands.Number("[SOURce:]PULSe<2>:DELay", Width, (_, gap) => Change(() => _gap = gap), _ => _gap);
        commands.Number(
            "[SOURce:]VOLTage[:LEVel][:IMMediate]:HIGH", High, (_, on) => Change(() => _on = on), _ => _on);
        commands.Number(
            "[SOURce:]VOLTage[:LEVel][:IMMediate]:LOW",
            Low,
            (_, off) => Change(() => Bench.GateOff = off),
            _ => Bench.GateOff);
        commands.Switch("OUTPut[:STATe]", on => Change(() => _output = on), () => _output);
        commands.Event("INITiate[:IMMediate][:ALL]", _ => Arm());
        commands.Event("TRIGger[:SEQuence][:IMMediate]", _ => Fire());
        commands.Event("ABORt", _ => _armed = false);
        commands.Ask("[SOURce:]PULSe:COUNt?", _ => Numbers.Nr1(_count));
    }

    /// <summary>Whether a trigger would fire it: its output alone holds the gates at their off level.</summary>
    public bool CanFire => _armed;

    /// <summary>Trains fired.</summary>
    public long Count => _count;

    private PulseTrain Train =>
        Flaws.On(new PulseTrain(_first, _gap, _second, _on, Bench.GateOff, Bench.BankVoltage), Bench.Faults);

    /// <inheritdoc/>
    protected override void Refresh()
    {
        Scpi.Status.Operation.SetCondition(_armed ? WaitsForTrigger : 0);
        if (_armed && Bench.BankAtRest && Bench.WorksAhead)
        {
            _trains.Prepare(Bench.HalfBridge, Train, _scope.Window);
        }
    }

    /// <inheritdoc/>
    protected override void Foresee(string message)
    {
        if (!message.Contains("TR", StringComparison.OrdinalIgnoreCase))
        {
            return;
        }

        (CircuitParameters Circuit, PulseTrain Train, Window Window) next;
        lock (Bench.Gate)
        {
            Bench.Advance();
            if (!_armed || !Bench.BankAtRest)
            {
                return;
            }

            next = (Bench.HalfBridge, Train, _scope.Window);
        }

        try
        {
            _ = _trains.Get(next.Circuit, next.Train, next.Window);
        }
        catch (ArithmeticException)
        {
            // Said by the train itself when it is fired.
        }
    }

    /// <inheritdoc/>
    protected override void Reset() =>
        (_first, _gap, _second, _on, Bench.GateOff, _output, _armed) =
            (Width.Default, Width.Default, Width.Default, High.Default, Low.Default, false, false);

    /// <inheritdoc/>
    protected override Answer Deliver(string message, Reply reply) =>
        _silent ? new Answer([]) : base.Deliver(message, reply);

    private void SetWidth(Call call, double width) => Change(() =>
    {
        if (call.Suffix == 1)
        {
            _first = width;
        }
        else
        {
            _second = width;
        }
    });

    private void Change(Action set)
    {
        set();
        _armed = false;
    }

    private void Arm()
    {
        if (_armed)
        {
            throw new ScpiException(-213, "armed already");
        }

        if (!Bench.Chain.Closed)
        {
            throw new ScpiException(-221, "the safety chain is open");
        }

        if (!_output)
        {
            throw new ScpiException(-221, "the output is off");
        }

        _armed = true;
        if (Bench.Faults.Has(FaultCatalogue.FiresOnArm))
        {
            Fire();
        }
    }

    private void Fire()
    {
        if (!_armed)
        {
            throw new ScpiException(-211, "not armed");
        }

        _armed = false;
        One();
        if (Bench.Faults.Take(FaultCatalogue.FiresTwice))
        {
            One();
        }
    }

    private void One()
    {
        _count++;
        Bench.Reached(MomentKind.Fire, _count);
        _silent |= Bench.Faults.Has(FaultCatalogue.FireUnanswered);
        if (Bench.Faults.Take(FaultCatalogue.SupplySags))
        {
            Bench.Sag(FaultCatalogue.BusError);
        }

        PulseTrain train = Flaws.Once(Train, Bench.Faults);
        CircuitParameters circuit = Flaws.Once(Bench.HalfBridge, Bench.Faults);
        try
        {
            TrainTrajectory trajectory = _trains.Get(circuit, train, _scope.Window);
            _scope.See(trajectory, start => _trains.Get(circuit, train, _scope.Window with { Start = start }), _count);
            Bench.Fired(trajectory.End);
        }
        catch (ArithmeticException unsolved)
        {
            throw new ScpiException(-240, unsolved.Message);
        }
    }
}
