using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Settings;
using BenchRunner.Acceptance.Tests.Files;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Settings;

public sealed class SettingsFileTests
{
    [Fact]
    public void Every_value_arrives_in_SI()
    {
        AnalysisSettings settings = Read(Examples.Settings);
        Assert.Equal((DeviceKind.Mosfet, DevicePosition.Low), (settings.Kind, settings.Position));
        Assert.Equal(new ChannelCorrection(1.013, 0.96, 4.6e-9), Assert.Single(settings.Corrections).Value);
        Assert.Equal(Channel.IdLow, Assert.Single(settings.Corrections).Key);
        Assert.Equal(new Shunt(20e-3, 100e-12), settings.Shunt);
        Assert.Equal((0.8, 2.4), (settings.ForwardVoltage, settings.HighSideThreshold));
        Assert.Equal((100e-9, 300e-9), (settings.IntegrationTime, settings.DeadTime));
        Assert.Equal("qrr/fall-10", settings.Definitions["qrr"]);
    }

    [Fact]
    public void What_is_left_out_has_the_default_of_the_analysis()
    {
        AnalysisSettings settings = Read("channels: { vds_low: { skew: 1 ns } }");
        var usual = new AnalysisSettings();
        Assert.Equal(new ChannelCorrection(1, null, 1e-9), settings.Corrections[Channel.VdsLow]);
        Assert.Equal((usual.Kind, usual.Position), (settings.Kind, settings.Position));
        Assert.Equal(usual.DeadTime, settings.DeadTime);
        Assert.Null(settings.Shunt);
        Assert.Null(settings.IntegrationTime);
    }

    [Fact]
    public void A_probe_is_late_by_its_delay_and_its_skew_together() =>
        Assert.Equal(
            new ChannelCorrection(1, null, 13e-9),
            Read("channels: { vds_low: { delay: 12 ns, skew: 1 ns } }").Corrections[Channel.VdsLow]);

    [Fact]
    public void A_channel_may_be_copied_from_a_bench_file()
    {
        int start = Examples.Bench.IndexOf("channels:\n", StringComparison.Ordinal);
        string block = Examples.Bench[start..Examples.Bench.IndexOf("envelope:", StringComparison.Ordinal)];
        Assert.Equal(6, Read(block).Corrections.Count);
    }

    private static AnalysisSettings Read(string text)
    {
        Read<AnalysisSettings> read = SettingsFile.Read(Readers.Source("settings.yaml", text));
        Assert.Empty(read.Problems);
        return read.Value!;
    }
}
