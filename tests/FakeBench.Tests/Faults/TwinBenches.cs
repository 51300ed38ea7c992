using System.Globalization;
using FakeBench.Fixtures;
using FakeBench.Tests.Instruments;

namespace FakeBench.Tests.Faults;

/// <summary>A bench with faults and a sound one beside it: same device, same trains, same noise, so that what differs
/// is the fault.</summary>
internal sealed class TwinBenches
{
    public const int Vgs = 1, Vds = 2, Id = 3, VgsHigh = 4, VdsHigh = 5, Vbus = 6;

    /// <summary>Samples a microsecond, and the sample of on1.</summary>
    public const int Microsecond = 500, On1 = 500;

    public static readonly string[] Channels = ["vgs_low", "vds_low", "id_low", "vgs_high", "vds_high", "vbus"];

    private TwinBenches(double volts, BenchSetup setup, string[] faults)
    {
        (Faulty, Sound) = (new TestBench(setup, Channels, faults), new TestBench(setup, Channels));
        foreach (TestBench bench in Both)
        {
            bench.Charge(volts);
            Configure(bench, volts);
        }
    }

    public TestBench Faulty { get; }

    public TestBench Sound { get; }

    private TestBench[] Both => [Faulty, Sound];

    /// <summary>Two benches at 400 V and 20 A, or at another voltage with the same first pulse.</summary>
    public static TwinBenches With(string fault, double volts = 400) =>
        new(volts, new BenchSetup(new BenchValues(5), "W1200-9020"), [fault]);

    public static TwinBenches WithPlate(string fault) =>
        new(400, new BenchSetup(new BenchValues(5), "W1200-9020") { Hotplate = true }, [fault]);

    /// <summary>Fires one train on each.</summary>
    public TwinBenches Fire()
    {
        Faulty.Fire();
        Sound.Fire();
        return this;
    }

    /// <summary>The inputs whose codes differ.</summary>
    public int[] Differing() =>
        [.. Enumerable.Range(1, Channels.Length).Where(i => !Faulty.Codes(i).SequenceEqual(Sound.Codes(i)))];

    /// <summary>Time between the n-th and the next crossing of the gate through 7 V, s.</summary>
    public static double Between(TestBench bench, int nth)
    {
        double[] gate = bench.Values(Vgs);
        var crossings = new List<int>();
        for (int i = 1; i < gate.Length; i++)
        {
            bool crosses = (gate[i - 1] < 7) != (gate[i] < 7);
            bool rings = crossings.Count > 0 && i - crossings[^1] < 0.1 * Microsecond;
            if (crosses && !rings)
            {
                crossings.Add(i);
            }
        }

        return (crossings[nth] - crossings[nth - 1]) * 2e-9;
    }

    private static void Configure(TestBench bench, double volts)
    {
        TestBench.Say(
            bench.Pulser,
            "SOUR:PULS1:WIDT 6.06 US;:SOUR:PULS2:DEL 6 US;WIDT 3 US;:SOUR:VOLT:HIGH 18;LOW -4;:OUTP ON");
        foreach (int input in (int[])[Vgs, VgsHigh])
        {
            Range(input, 40, 5);
        }

        foreach (int input in (int[])[Vds, VdsHigh, Vbus])
        {
            Range(input, 3 * volts, volts);
        }

        Range(Id, 200, 40);
        TestBench.Say(bench.Scope, "SENS:SWE:TINT 2 NS;POIN 9000;OFFS:TIME 1 US");
        TestBench.Say(bench.Scope, "TRIG:SOUR INT1;LEV 7;SLOP POS;:FORM INT,16;FORM:BORD SWAP");

        void Range(int input, double span, double middle) => TestBench.Say(
            bench.Scope,
            string.Create(CultureInfo.InvariantCulture, $"SENS:VOLT{input}:RANG:UPP {span};OFFS {middle}"));
    }
}
