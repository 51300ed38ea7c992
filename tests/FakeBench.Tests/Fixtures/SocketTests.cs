using FakeBench.Fixtures;
using FakeBench.Physics;
using FakeBench.Population;
using FakeBench.Tests.Instruments;

namespace FakeBench.Tests.Fixtures;

public sealed class SocketTests
{
    private static readonly PulseTrain Rated = new(8.08e-6, 6e-6, 3e-6, 18, -4, 600);

    [Fact]
    public void With_the_load_on_the_negative_rail_the_high_place_fires_and_a_nominal_module_gives_the_mirrored_train()
    {
        TrainTrajectory low = Fire(Setup("W1200-9020"));
        TrainTrajectory high = Fire(Setup("W1200-9020") with { LoadToNegative = true });

        Assert.All(Enum.GetValues<Signal>(), signal => Assert.Equal(low[signal], high[Mirror.Of(signal)]));
        Assert.Equal(40.4, high[Signal.IdHigh][9000], 1.0); // 8 us up the first pulse
        Assert.Equal(low[Signal.Vbus], high[Signal.Vbus]);
    }

    [Fact]
    public void Mirrored_a_defect_stays_in_its_place()
    {
        // The high place's diode recovers when the low one fires, and only then.
        double Recovery(BenchSetup setup, Signal diode) => Fire(setup)[diode][14_100..16_000].Max();

        Assert.Equal(51, Recovery(Setup("W1200-9001"), Signal.IdHigh), 1.0);
        Assert.Equal(41, Recovery(Setup("W1200-9001") with { LoadToNegative = true }, Signal.IdLow), 1.0);
    }

    [Theory]
    [InlineData(false, null, 18.0e-3)]
    [InlineData(true, null, 6.0e-3)]
    [InlineData(false, "W1200-0002", 18.0e-3)]
    [InlineData(true, "W1200-0002", 18.0e-3)]
    public void The_place_that_fires_leaks_in_a_hold(bool negative, string? companion, double expected)
    {
        // The leaky module's defect is in its low place; a single part is leaky wherever it lies. At 600 V: 20 uS give
        // 12 mA, the bleeder of 100 kOhm of the separate prototype another 6.0 mA.
        var socket = new Socket(Setup("W1200-9005") with { LoadToNegative = negative, Companion = companion });

        Assert.Equal(expected, 600 * (socket.Leakage + 1e-5), 0.1e-3);
    }

    [Fact]
    public void A_companion_stays_in_when_the_device_is_exchanged()
    {
        var socket = new Socket(Setup("W1200-0001") with { Companion = "W1200-9001" });
        CircuitParameters first = socket.On(new BenchParts(), 23, 600);
        socket.Insert("W1200-0002", wrong: false);
        CircuitParameters second = socket.On(new BenchParts(), 23, 600);

        Assert.Equal("W1200-0002", socket.Serial);
        Assert.NotEqual(first.Low, second.Low);
        Assert.Equal(first.High, second.High);
        Assert.Equal(1.5 * 18e-9, second.High.Diode.Lifetime, 1e-15);
    }

    [Fact]
    public void A_single_part_is_the_same_in_either_place()
    {
        BenchSetup setup = Setup("W1200-0001") with { Companion = "W1200-0002" };
        CircuitParameters positive = new Socket(setup).On(new BenchParts(), 23, 600);
        CircuitParameters negative = new Socket(setup with { LoadToNegative = true }).On(new BenchParts(), 23, 600);

        Assert.Equal((positive.Low, positive.High), (negative.Low, negative.High));
    }

    [Theory]
    [InlineData(false, null)]
    [InlineData(true, "W1200-0002")]
    public void A_device_that_died_stays_dead_until_it_is_exchanged(bool negative, string? companion)
    {
        var bench = new TestBench(
            Setup("W1200-0001") with { LoadToNegative = negative, Companion = companion },
            [negative ? "vgs_high" : "vgs_low", "vds_low", "id_low", "vbus"],
            "device-dies@fire:2");
        bench.Charge(600);
        bench.Configure();
        bench.Fire();
        Assert.Equal(600, bench.Volts, 1.0);
        bench.Fire();
        Assert.InRange(bench.Volts, 0, 1);
        bench.Wait(30);
        Assert.InRange(bench.Volts, 0, 1);
        Assert.Null(bench.Bench.Do("open"));
        Assert.Null(bench.Bench.Do("close"));
        bench.Charge(600);
        Assert.InRange(bench.Volts, 0, 1);
        Assert.Null(bench.Bench.Do("open"));
        Assert.Null(bench.Bench.Do("insert W1200-0003"));
        Assert.Null(bench.Bench.Do("close"));
        bench.Charge(600);
        Assert.Equal(600, bench.Volts, 1.0);
    }

    [Fact]
    public void Dies_at_off2_spares_the_proving_train_and_the_half_voltage()
    {
        var socket = new Socket(Setup("W1200-9013"));
        Assert.Null(socket.On(new BenchParts(), 23, 48).Low.DiesAfterOff2);
        Assert.Null(socket.On(new BenchParts(), 23, 400).Low.DiesAfterOff2);
        Assert.Equal(30e-9, socket.On(new BenchParts(), 23, 600).Low.DiesAfterOff2);
    }

    [Fact]
    public void Dies_at_the_last_off2_counts_its_own_trains()
    {
        var socket = new Socket(Setup("W1200-9019"));
        for (int i = 0; i < 10; i++)
        {
            Assert.Null(socket.On(new BenchParts(), 23, 600).Low.DiesAfterOff2);
            socket.Fired(died: false);
        }

        Assert.Equal(30e-9, socket.On(new BenchParts(), 23, 600).Low.DiesAfterOff2);
        socket.Insert("W1200-9019", wrong: false);
        Assert.Null(socket.On(new BenchParts(), 23, 600).Low.DiesAfterOff2);
    }

    [Fact]
    public void Without_their_defects_named_devices_are_sound_and_others_are_as_they_were()
    {
        CircuitParameters nominal = new Socket(Setup("W1200-9020")).On(new BenchParts(), 23, 600);
        Assert.All(DevicePopulation.Named, device =>
            Assert.Equal(nominal, new Socket(Setup(device.Serial) with { Sound = true }).On(new BenchParts(), 23, 600)));
        Assert.Equal(
            new Socket(Setup("W1200-0001")).On(new BenchParts(), 23, 600),
            new Socket(Setup("W1200-0001") with { Sound = true }).On(new BenchParts(), 23, 600));
    }

    private static BenchSetup Setup(string serial) => new(new BenchValues(5), serial);

    private static TrainTrajectory Fire(BenchSetup setup) =>
        HalfBridge.Simulate(new Socket(setup).On(setup.Values.Parts, 23, 600), Rated, -1e-6, 1e-9, 20_000);
}
