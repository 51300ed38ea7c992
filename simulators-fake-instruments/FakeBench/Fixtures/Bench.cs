using FakeBench.Faults;
using FakeBench.Physics;
using FakeBench.Population;

namespace FakeBench.Fixtures;

/// <summary>What the instruments share: the bank, the device in its socket, the enclosure, the safety chain.</summary>
/// <remarks>
/// Nothing runs by itself: whoever looks first brings the bench up to the clock (<see cref="Advance"/>), in which
/// everything that was due (watchdog, protection, faults) happens in its order. All members want <see cref="Gate"/>
/// held.
/// </remarks>
public sealed class Bench
{
    private readonly TimeProvider _time;
    private readonly long _start;
    private readonly Bus _bus = new();
    private readonly BenchSetup _setup;
    private readonly Socket _socket;
    private bool _wasUp;

    /// <summary>Makes a bench with a device in its socket, the enclosure closed, the bank empty.</summary>
    /// <param name="setup">What it is made of.</param>
    /// <param name="faults">What goes wrong.</param>
    /// <param name="time">The clock.</param>
    public Bench(BenchSetup setup, FaultPlan faults, TimeProvider time)
    {
        ArgumentNullException.ThrowIfNull(setup);
        ArgumentNullException.ThrowIfNull(faults);
        ArgumentNullException.ThrowIfNull(time);
        (_setup, Faults, _time) = (setup, faults, time);
        _start = time.GetTimestamp();
        Supply = new SupplyStage { Limit = setup.Values.SupplyLimit };
        Plate = setup.Hotplate ? new Plate(setup.Values.PlateCapacity, setup.Ambient) : null;
        _socket = new Socket(setup);
        Begun(Faults.Reach(MomentKind.Start, 0));
        Begun(Faults.Reach(MomentKind.Volts, 0));
    }

    /// <summary>Raised when the safety chain opens: pulses are inhibited.</summary>
    public event Action? ChainOpened;

    /// <summary>Held by whoever looks at the bench or changes it.</summary>
    public Lock Gate { get; } = new();

    /// <summary>Component values.</summary>
    public BenchValues Values => _setup.Values;

    /// <summary>Whether the load goes to the negative rail and the high place fires.</summary>
    public bool LoadToNegative => _setup.LoadToNegative;

    /// <summary>What goes wrong.</summary>
    public FaultPlan Faults { get; }

    /// <summary>Loop, emergency stop, watchdog, bleeder.</summary>
    public SafetyChain Chain { get; } = new();

    /// <summary>The supply's power stage.</summary>
    public SupplyStage Supply { get; }

    /// <summary>The hotplate; null: none.</summary>
    public Plate? Plate { get; }

    /// <summary>Temperature of the devices, degC: that of the plate, or of the room. No train warms them.</summary>
    /// <remarks>In steps of 0.5 K, so that a plate that has all but settled gives the same trains.</remarks>
    public double DeviceTemperature => Math.Round(2 * (Plate?.Temperature ?? _setup.Ambient)) / 2;

    /// <summary>Level at which the pulser was told to hold both gates off, V.</summary>
    public double GateOff { get; set; }

    /// <summary>Seed of population and noise.</summary>
    public int Seed => _setup.Seed;

    /// <summary>Whether trains and records are computed beside what goes on.</summary>
    public bool WorksAhead => _setup.WorksAhead;

    /// <summary>Serial of the device in the socket.</summary>
    public string Serial => _socket.Serial;

    /// <summary>What the device in the socket brings with it.</summary>
    public IReadOnlyList<Change> Changes => _socket.Changes;

    /// <summary>Time since the start, s.</summary>
    public double Now { get; private set; }

    /// <summary>Voltage of the bank, V.</summary>
    public double BankVoltage => _bus.Voltage;

    /// <summary>Whether the bank has come to its end value.</summary>
    public bool BankAtRest => _bus.AtRest;

    /// <summary>Current that the supply gives, A.</summary>
    public double SupplyCurrent => Bus.Current(Circuit(), _bus.Source, _bus.Voltage);

    /// <summary>Whether the supply is in current limit.</summary>
    public bool InCurrentLimit => Supply.Output && SupplyCurrent >= Supply.Limit;

    /// <summary>Whether the supply's inner voltage still follows its set-point.</summary>
    public bool Slewing => Supply.Output && _bus.Source != SupplyTarget();

    /// <summary>The half bridge with the device in its socket.</summary>
    public CircuitParameters HalfBridge =>
        _socket.On(Flaws.On(Values.Parts, Faults), DeviceTemperature, BankVoltage);

    /// <summary>Brings everything up to the clock.</summary>
    public void Advance()
    {
        double until = _time.GetElapsedTime(_start).TotalSeconds;
        while (Now < until)
        {
            double stop = Math.Min(until, Math.Min(Chain.WatchdogDue, Faults.NextSeconds));
            double threshold = Faults.NextVolts;
            if (Supply.Output)
            {
                threshold = Math.Min(threshold, Supply.Protection);
            }

            double span = Math.Max(stop - Now, 0);
            double moved = _bus.Advance(Circuit(), SupplyTarget(), Values.Slew, span, threshold);
            double next = moved < span ? Now + moved : Math.Max(stop, Now);
            Plate?.Advance(next - Now);
            Now = next;
            Happen();
        }

        Happen();
    }

    /// <summary>Switches the supply's output.</summary>
    public void SwitchSupply(bool on)
    {
        Supply.Output = on;
        _bus.StartSource();
    }

    /// <summary>A train was fired: what it left behind.</summary>
    public void Fired(EndState end)
    {
        ArgumentNullException.ThrowIfNull(end);
        _bus.SetVoltage(Math.Max(end.BankVoltageAfter, 0));
        _socket.Fired(end.LowDied);
    }

    /// <summary>Something takes a share of the bank's charge at once.</summary>
    public void Sag(double share) => _bus.SetVoltage(_bus.Voltage * (1 - share));

    /// <summary>Something has been counted: faults of that moment begin.</summary>
    public void Reached(MomentKind kind, double count) => Begun(Faults.Reach(kind, count));

    /// <summary>The operator's hands: <c>open</c>, <c>insert SERIAL</c>, <c>close</c>, <c>stop</c>,
    /// <c>release</c>.</summary>
    /// <returns>Why it could not be done; null: done.</returns>
    public string? Do(string hand)
    {
        ArgumentNullException.ThrowIfNull(hand);
        string[] words = hand.Split(' ', StringSplitOptions.RemoveEmptyEntries | StringSplitOptions.TrimEntries);
        switch (words)
        {
            case ["open" or "close" or "insert", ..] when Faults.Has(FaultCatalogue.NotExchanged):
                break;
            case ["open"]:
                Chain.EnclosureOpen = true;
                break;
            case ["close"]:
                (Chain.EnclosureOpen, Chain.LoopBroken) = (false, false);
                break;
            case ["stop"]:
                Chain.EmergencyStop = true;
                break;
            case ["release"]:
                Chain.EmergencyStop = false;
                break;
            case ["insert", { } serial]:
                if (!Chain.EnclosureOpen)
                {
                    return "the enclosure is closed; open it first";
                }

                _socket.Insert(serial, Faults.Has(FaultCatalogue.WrongPart));
                break;
            default:
                return $"no hand does '{hand}'; open, insert SERIAL, close, stop, release";
        }

        Happen();
        return null;
    }

    private double SupplyTarget() =>
        Supply.Voltage * (Faults.Has(FaultCatalogue.SupplyLow) ? 1 - FaultCatalogue.BusError : 1);

    private BusCircuit Circuit()
    {
        double bleeder = Values.Bleeder * (Faults.Has(FaultCatalogue.BleederWeak) ? FaultCatalogue.WeakBleeder : 1);
        double relay = Chain.Bleeder && !Faults.Has(FaultCatalogue.BusStaysUp) ? 1 / bleeder : 0;
        return new BusCircuit(
            Values.Parts.BankCapacitance,
            relay + (1 / BenchValues.EmptySocket) + LeakConductance(),
            Values.SupplyResistance,
            Supply.Limit,
            Supply.Output);
    }

    private double LeakConductance()
    {
        double leak = _socket.Leakage;
        return leak / (1 + (leak * Values.Parts.LoadResistance));
    }

    private void Happen()
    {
        Begun(Faults.Reach(MomentKind.Seconds, Now));
        Begun(Faults.Reach(MomentKind.Volts, _bus.Voltage));
        Chain.Watch(Now);
        _wasUp |= _bus.Voltage > FaultCatalogue.RisesTo;
        if (_wasUp && Chain.Bleeder && _bus.Voltage < FaultCatalogue.RisesFrom && Faults.Take(FaultCatalogue.BusRises))
        {
            _bus.SetVoltage(FaultCatalogue.RisesTo);
        }

        if (Supply.Output && _bus.Voltage >= Supply.Protection)
        {
            TripSupply();
        }

        if (!Chain.Closed)
        {
            OpenChain();
        }
    }

    private void TripSupply()
    {
        Supply.Tripped = true;
        SwitchSupply(false);
    }

    private void OpenChain()
    {
        Chain.Bleeder = true;
        SwitchSupply(false);
        ChainOpened?.Invoke();
    }

    private void Begun(IReadOnlyList<string> faults)
    {
        foreach (string fault in faults)
        {
            switch (fault)
            {
                case FaultCatalogue.InterlockOpens:
                    Chain.LoopBroken = true;
                    break;
                case FaultCatalogue.EmergencyStop:
                    Chain.EmergencyStop = true;
                    break;
                case FaultCatalogue.SupplyOvershoots:
                    _bus.SetVoltage(Supply.Voltage * FaultCatalogue.Overshoot);
                    break;
                case FaultCatalogue.Arcing:
                    Chain.LoopBroken = true;
                    break;
                case FaultCatalogue.OverVoltageTrips:
                    TripSupply();
                    break;
                case FaultCatalogue.SecondController:
                    Supply.Voltage *= FaultCatalogue.ForeignSetting;
                    break;
                case FaultCatalogue.PlateDrifts:
                    Plate?.Disturb(-FaultCatalogue.PlateDrift);
                    break;
                default:
                    break;
            }
        }
    }
}
