using FakeBench.Faults;
using FakeBench.Fixtures;
using FakeBench.Physics;

namespace FakeBench.Hosting;

/// <summary>What <c>serve</c> is asked for.</summary>
public sealed record ServeOptions
{
    private static readonly string[] FiringFirst = ["vgs_low", "vds_low", "id_low", "vgs_high", "vds_high", "vbus"];

    /// <summary>Device in the socket.</summary>
    public string Device { get; init; } = "W1200-0001";

    /// <summary>Seed of population, noise and jitter.</summary>
    public int Seed { get; init; } = 1;

    /// <summary>How much faster charging and bleeding are than on the lab's bench, 1 to 5.</summary>
    public double Pace { get; init; } = 1;

    /// <summary>Faults.</summary>
    public IReadOnlyList<Fault> Faults { get; init; } = [];

    /// <summary>Serial of the companion in the other place; null: the device fills both.</summary>
    public string? Companion { get; init; }

    /// <summary>Whether the load goes to the negative rail and the high place fires.</summary>
    public bool LoadToNegative { get; init; }

    /// <summary>Whether named devices come without their defect.</summary>
    public bool Sound { get; init; }

    /// <summary>Channels on the scope's inputs 1, 2, …: of the firing place first.</summary>
    public IReadOnlyList<string> Channels
    {
        get => field ?? [.. FiringFirst.Select(channel => LoadToNegative ? Mirror.Of(channel) : channel)];
        init;
    }

    /// <summary>Bits of the scope's converter, 8 or 12.</summary>
    public int Bits { get; init; } = 12;

    /// <summary>Whether the interlock is a serial device; otherwise it is served over TCP like the others.</summary>
    public bool SerialInterlock { get; init; } = PseudoTerminal.IsSupported;

    /// <summary>Whether the instruments are served over HiSLIP instead of raw sockets; a serial interlock stays
    /// one.</summary>
    public bool Hislip { get; init; }

    /// <summary>Whether the devices lie on a hotplate.</summary>
    public bool Hotplate { get; init; }

    /// <summary>Temperature of the room, degC.</summary>
    public double Ambient { get; init; } = 23;

    /// <summary>Whether the bench file that is written says that devices are exchanged by hand.</summary>
    public bool ByHand { get; init; }

    /// <summary>Bench file to write; null: none.</summary>
    public string? WriteBench { get; init; }

    /// <summary>Whether it says when outputs and bank change; see <see cref="StateTeller"/>.</summary>
    public bool SayStates { get; init; }

    /// <summary>Whether the end of standard input ends the program, once nobody is connected and the bank is down; it then
    /// ignores a terminal's interrupts.</summary>
    public bool EndsWithInput { get; init; }

    /// <summary>What a role is served over: <c>tcp</c>, <c>hislip</c> or <c>serial</c>.</summary>
    public string LinkOf(string role) =>
        role == "interlock" && SerialInterlock ? "serial" : Hislip ? "hislip" : "tcp";

    /// <summary>What the bench is made of.</summary>
    public BenchSetup Setup => new(new BenchValues(Pace), Device)
    {
        Seed = Seed,
        Companion = Companion,
        LoadToNegative = LoadToNegative,
        Sound = Sound,
        Hotplate = Hotplate,
        Ambient = Ambient,
    };
}
