using FakeBench.Faults;
using FakeBench.Hosting;

namespace FakeBench.Tests.Hosting;

public sealed class ArgumentsTests
{
    [Fact]
    public void Options_are_read()
    {
        ServeOptions options = Arguments.Parse(
            ["--device", "W1200-0003", "--seed", "7", "--pace", "2.5", "--fault", "late-reply", "--fault",
                "stale-record@fire:9", "--channels", "vgs_low,id_low", "--ends-with-input", "--bits", "8",
                "--interlock", "tcp", "--hotplate", "--ambient", "30"]);
        Assert.Equal(("W1200-0003", 7, 2.5, 8), (options.Device, options.Seed, options.Pace, options.Bits));
        Assert.Equal(["vgs_low", "id_low"], options.Channels);
        Assert.Equal(new Fault("stale-record", new Moment(MomentKind.Fire, 9)), options.Faults[1]);
        Assert.True(options.EndsWithInput);
        Assert.Equal((true, 30), (options.Hotplate, options.Ambient));
        Assert.False(options.SerialInterlock);
    }

    [Theory]
    [InlineData("--pace", "6")]
    [InlineData("--pace", "fast")]
    [InlineData("--seed", "x")]
    [InlineData("--bits", "10")]
    [InlineData("--load", "sideways")]
    [InlineData("--exchange", "robot")]
    [InlineData("--companion", "no spaces")]
    [InlineData("--ambient", "hot")]
    [InlineData("--device", "no spaces")]
    [InlineData("--channels", "vgs_low,what")]
    [InlineData("--channels", "vgs_low,vgs_low")]
    [InlineData("--interlock", "usb")]
    [InlineData("--fault", "what")]
    [InlineData("--what", "1")]
    [InlineData("--seed")]
    public void A_wrong_option_is_named(params string[] arguments)
    {
        FormatException wrong = Assert.Throws<FormatException>(() => Arguments.Parse(arguments));
        Assert.NotEmpty(wrong.Message);
    }

    [Fact]
    public void Load_companion_and_exchange_are_read()
    {
        ServeOptions options = Arguments.Parse(
            ["--load", "negative", "--companion", "W1200-0002", "--sound", "--exchange", "by-hand"]);
        Assert.Equal(
            (true, "W1200-0002", true, true),
            (options.LoadToNegative, options.Companion, options.Sound, options.ByHand));
        Assert.Equal(["vgs_high", "vds_high", "id_high", "vgs_low", "vds_low", "vbus"], options.Channels);
        string file = BenchFile.Write(options, []);
        Assert.Contains("exchange: by-hand\n", file, StringComparison.Ordinal);
        Assert.Contains(", to: negative }\n", file, StringComparison.Ordinal);
        Assert.Contains("  id_high: { scope: 3, probe: transformer,", file, StringComparison.Ordinal);
        Assert.DoesNotContain("shunt", file, StringComparison.Ordinal);
        Assert.DoesNotContain("temperature:", file, StringComparison.Ordinal);
    }

    [Fact]
    public void A_bench_file_states_probes_plate_and_read_back()
    {
        string file = BenchFile.Write(
            new ServeOptions { Hotplate = true, Ambient = 30 }, [("hotplate", "tcp 127.0.0.1 41003")]);
        Assert.Contains(
            "  vds_low: { scope: 2, probe: differential, rating: 1500 V, common-mode: 1500 V, bandwidth: 500 MHz, "
                + "attenuation: 100, ",
            file,
            StringComparison.Ordinal);
        Assert.Contains("dialect: generic-hotplate, connections: 4,", file, StringComparison.Ordinal);
        Assert.Contains("current-accuracy: 1 mA }\n", file, StringComparison.Ordinal);
        Assert.Contains("pulse: 20 us, temperature: 150 degC }\nambient: 30 degC\n", file, StringComparison.Ordinal);
    }

    [Fact]
    public void A_bench_file_names_every_link_and_the_components_of_its_pace()
    {
        string file = BenchFile.Write(
            new ServeOptions { Pace = 5 },
            [("supply", "tcp 127.0.0.1 41001"), ("voltmeter", "tcp 127.0.0.1 41002"),
                ("interlock", "serial /dev/pts/7")]);
        Assert.StartsWith(
            "format: 1\n", file[(file.IndexOf('\n', StringComparison.Ordinal) + 1)..], StringComparison.Ordinal);
        Assert.Contains(
            "  supply: { link: 'tcp 127.0.0.1:41001', dialect: generic-supply, connections: 4, identity: "
                + "'.*FAKEBENCH-SUPPLY.*' }\n",
            file,
            StringComparison.Ordinal);
        Assert.Contains("connections: 4, at: bank, identity: ", file, StringComparison.Ordinal);
        Assert.Contains(
            "  interlock: { link: 'serial /dev/pts/7', dialect: generic-interlock, ", file, StringComparison.Ordinal);
        Assert.Contains("bleeder: 5 kOhm", file, StringComparison.Ordinal);
        Assert.Contains("charging-current: 2.5 A", file, StringComparison.Ordinal);
        Assert.Contains("exchange: none\n", file, StringComparison.Ordinal);
        Assert.DoesNotContain("fake:", file, StringComparison.Ordinal);
    }
}
