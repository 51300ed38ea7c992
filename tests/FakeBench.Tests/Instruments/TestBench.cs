using System.Globalization;
using System.Text;
using FakeBench.Faults;
using FakeBench.Fixtures;
using FakeBench.Instruments;
using Microsoft.Extensions.Time.Testing;

namespace FakeBench.Tests.Instruments;

/// <summary>The instruments of a bench on a clock that the test moves.</summary>
internal sealed class TestBench
{
    public static readonly string[] Channels = ["vgs_low", "vds_low", "id_low", "vbus"];
    private readonly FakeTimeProvider _time = new();

    public TestBench(string serial = "W1200-0001", params string[] faults)
        : this(new BenchSetup(new BenchValues(5), serial), Channels, faults)
    {
    }

    public TestBench(BenchSetup setup, string[] channels, params string[] faults)
    {
        Bench = new Bench(setup, new FaultPlan(faults.Select(Fault.Parse)), _time);
        Panels = new FrontPanels(Bench, channels, 12);
    }

    public FrontPanels Panels { get; }

    public Bench Bench { get; }

    public Instrument Supply => Panels.Supply;

    public Instrument Pulser => Panels.Pulser;

    public Instrument Scope => Panels.Scope;

    public Instrument Voltmeter => Panels.Voltmeter;

    public Instrument Interlock => Panels.Interlock;

    public Instrument Hotplate => Panels.Hotplate ?? throw new InvalidOperationException("no hotplate");

    /// <summary>A bench with a hotplate.</summary>
    public static TestBench Hot(params string[] faults) =>
        new(new BenchSetup(new BenchValues(5), "W1200-0001") { Hotplate = true }, Channels, faults);

    public double Volts => Number(Voltmeter, "MEAS:VOLT:DC?");

    public static string Ask(Instrument instrument, string message) =>
        Encoding.Latin1.GetString(instrument.Obey(message).Bytes).TrimEnd('\n');

    public static double Number(Instrument instrument, string message) =>
        double.Parse(Ask(instrument, message), CultureInfo.InvariantCulture);

    /// <summary>Says something that must be obeyed without an error.</summary>
    public static void Say(Instrument instrument, string message)
    {
        Assert.Empty(instrument.Obey(message).Bytes);
        Assert.Equal("0,\"No error\"", Ask(instrument, "SYST:ERR?"));
    }

    /// <summary>Says something that must be refused with this error.</summary>
    public static void Refused(Instrument instrument, string message, int number)
    {
        Assert.Empty(instrument.Obey(message).Bytes);
        Assert.StartsWith(
            number.ToString(CultureInfo.InvariantCulture) + ",", Ask(instrument, "SYST:ERR?"),
            StringComparison.Ordinal);
    }

    public void Wait(double seconds) => _time.Advance(TimeSpan.FromSeconds(seconds));

    /// <summary>Takes the bleeder off and charges the bank.</summary>
    public void Charge(double volts)
    {
        Say(Interlock, "OUTP 0");
        Say(Supply, string.Create(CultureInfo.InvariantCulture, $"VOLT {volts};:OUTP 1"));
        Wait(1);
    }

    /// <summary>Sets pulser and scope for 600 V, 40 A.</summary>
    public void Configure()
    {
        Say(Pulser, "SOUR:PULS1:WIDT 8.08 US;:SOUR:PULS2:DEL 6 US;WIDT 3 US;:SOUR:VOLT:HIGH 18;LOW -4;:OUTP ON");
        Say(Scope, "SENS:VOLT1:RANG:UPP 40;OFFS 5;:SENS:VOLT2:RANG:UPP 1000;OFFS 400;:SENS:VOLT3:RANG:UPP 200;OFFS 40");
        Say(Scope, "SENS:VOLT4:RANG:UPP 1000;OFFS 400;:SENS:SWE:TINT 10 NS;POIN 2000;OFFS:TIME 1 US");
        Say(Scope, "TRIG:SOUR INT1;LEV 7;SLOP POS;:FORM INT,16;FORM:BORD SWAP");
    }

    /// <summary>Arms both and fires.</summary>
    public void Fire()
    {
        Say(Scope, "INIT");
        Say(Pulser, "INIT");
        Say(Pulser, "TRIG");
        Wait(0.25);
    }

    /// <summary>Reads the codes of a scope input, 16 bit, low byte first.</summary>
    public short[] Codes(int input)
    {
        byte[] bytes = Scope.Obey(string.Create(CultureInfo.InvariantCulture, $"TRAC:DATA? INT{input}")).Bytes;
        Assert.Equal((byte)'#', bytes[0]);
        int digits = bytes[1] - '0';
        int count = int.Parse(Encoding.ASCII.GetString(bytes, 2, digits), CultureInfo.InvariantCulture);
        Assert.Equal(2 + digits + count + 1, bytes.Length);
        return [.. Enumerable.Range(0, count / 2).Select(i => BitConverter.ToInt16(bytes, 2 + digits + (2 * i)))];
    }

    /// <summary>Reads a scope input in its own unit, by the preamble.</summary>
    public double[] Values(int input)
    {
        double[] preamble = Preamble(input);
        return [.. Codes(input).Select(code => ((code - preamble[6]) * preamble[4]) + preamble[5])];
    }

    public double[] Preamble(int input) =>
        [.. Ask(Scope, string.Create(CultureInfo.InvariantCulture, $"TRAC:PRE? INT{input}")).Split(',')
            .Select(f => double.Parse(f, CultureInfo.InvariantCulture))];
}
