using FakeBench.Physics;
using FakeBench.Population;

namespace FakeBench.Fixtures;

/// <summary>What lies in the fixture: one device in both places, or a part under test and its companion.</summary>
/// <remarks>
/// Without a companion one serial (a module) fills both places. With one, each serial is a single part: the one under
/// test fires, the companion freewheels, and a defect of either place's is that of the part.
/// </remarks>
public sealed class Socket
{
    private readonly BenchSetup _setup;
    private readonly Device? _companion;
    private Device _device;
    private long _trains;
    private bool _dead;

    /// <summary>Makes a socket with its first device.</summary>
    public Socket(BenchSetup setup)
    {
        ArgumentNullException.ThrowIfNull(setup);
        _setup = setup;
        _device = Draw(setup.Device);
        _companion = setup.Companion is { } serial ? Draw(serial) : null;
    }

    /// <summary>Serial of the device under test, as it was told.</summary>
    public string Serial => _device.Serial;

    /// <summary>What the device under test brings with it: changes of its own and of the bench.</summary>
    public IReadOnlyList<Change> Changes => _device.Changes;

    /// <summary>Leakage of the place that blocks while both gates are off, S: the load pulls the switch node to the
    /// other rail, so the place that fires stands across the bank alone.</summary>
    public double Leakage => Firing().Switch.Leakage;

    /// <summary>Takes the device under test out and puts another one in.</summary>
    /// <param name="serial">Its serial.</param>
    /// <param name="wrong">Whether the part that carries this serial is another one than it says.</param>
    public void Insert(string serial, bool wrong)
    {
        Device told = Draw(serial);
        _device = wrong
            ? told.With("wrong-part", told.ExpectedOutcome, [.. told.Changes, .. DevicePopulation.WrongPartChanges])
            : told;
        (_trains, _dead) = (0, false);
    }

    /// <summary>A train was fired.</summary>
    /// <param name="died">Whether the firing place died in it.</param>
    public void Fired(bool died)
    {
        _trains++;
        _dead |= died;
    }

    /// <summary>The circuit of the next train.</summary>
    /// <param name="bench">The bench's own parts.</param>
    /// <param name="celsius">Temperature of the devices, degC.</param>
    /// <param name="volts">Bus voltage, V.</param>
    public CircuitParameters On(BenchParts bench, double celsius, double volts)
    {
        PlaceParts firing = Firing();
        bool dies = !_dead && _device.Dies is { } death && death.Comes(_trains + 1, volts);
        firing = firing with { DiesAfterOff2 = dies ? Death.Delay : null };
        return new CircuitParameters(
            Population.Changes.On(bench, Changes),
            ThermalDrift.At(firing, celsius),
            ThermalDrift.At(Freewheeling(), celsius))
        {
            LoadToNegative = _setup.LoadToNegative,
        };
    }

    private Device Draw(string serial) => DevicePopulation.Draw(serial, _setup.Seed, _setup.Sound);

    private PlaceParts Firing()
    {
        PlaceParts place = _companion is not null ? _device.Alone.Low
            : _setup.LoadToNegative ? _device.High with { Package = _device.Low.Package }
            : _device.Low;
        return _dead ? place.Shorted() : place;
    }

    private PlaceParts Freewheeling() => _companion is not null ? _companion.Alone.High
        : _setup.LoadToNegative ? _device.Low with { Package = _device.High.Package }
        : _device.High;
}
