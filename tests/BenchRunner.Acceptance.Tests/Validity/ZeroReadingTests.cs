using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Validity;

/// <summary>What a zero capture gives: recorded = gain · true + offset, so offset = mean − gain · true.</summary>
public sealed class ZeroReadingTests
{
    [Fact]
    public void An_offset_that_the_bench_does_not_state_is_taken_from_the_zero_capture()
    {
        Bench bench = Stating(Channel.VdsLow, gain: 1.02, offset: null);
        ZeroReading zero = Of(bench, (Channel.VdsLow, [5, 6, 5, 6]));

        Assert.Equal(0, zero.Residual(Channel.VdsLow));
        Assert.Equal(
            new ChannelCorrection(1.02, 5.5, 3e-9),
            zero.ApplyTo(new AnalysisSettings
            {
                Corrections = new Dictionary<Channel, ChannelCorrection>
                {
                    [Channel.VdsLow] = new ChannelCorrection(1.02, null, 3e-9),
                },
            }).Corrections[Channel.VdsLow]);
    }

    [Fact]
    public void A_stated_offset_stays_and_what_it_leaves_is_known()
    {
        Bench bench = Stating(Channel.VdsLow, gain: 2, offset: 4);
        ZeroReading zero = Of(bench, (Channel.VdsLow, [5, 6, 5, 6]));

        Assert.Equal(0.75, zero.Residual(Channel.VdsLow));
        Assert.Empty(zero.ApplyTo(new AnalysisSettings()).Corrections);
    }

    [Fact]
    public void What_the_bank_still_holds_is_no_offset_of_the_probes_across_it()
    {
        Bench bench = Stating(Channel.Vbus, gain: 1, offset: null);
        ZeroReading zero = ZeroReading.Of([Trace(Channel.Vbus, [13])], bench, Shipped.Rated, bank: 12.5);

        Assert.Equal(0.5, zero.ApplyTo(new AnalysisSettings()).Corrections[Channel.Vbus].Offset);
    }

    [Fact]
    public void The_gates_bias_is_not_taken_for_an_offset_nor_a_currents_zero_for_a_stated_one()
    {
        Bench bench = Shipped.Bench with
        {
            Channels = [.. Shipped.Bench.Channels.Select(setup => setup with { Offset = null })],
        };
        ZeroReading zero = Of(bench, (Channel.VgsLow, [-4]), (Channel.IdLow, [2]));

        Assert.Empty(zero.ApplyTo(new AnalysisSettings()).Corrections);
        Assert.Equal(2, zero.Residual(Channel.IdLow));
    }

    [Fact]
    public void A_later_zero_moves_the_currents_alone()
    {
        Bench bench = Stating(Channel.VdsLow, gain: 1, offset: 0);
        ZeroReading first = Of(bench, (Channel.VdsLow, [1]), (Channel.IdLow, [0]));
        ZeroReading later = Of(bench, (Channel.VdsLow, [600]), (Channel.IdLow, [3]));

        ZeroReading both = first.WithCurrentsOf(later);

        Assert.Equal(1, both.Residual(Channel.VdsLow));
        Assert.Equal(3, both.Residual(Channel.IdLow));
        Assert.Null(both.Residual(Channel.VdsHigh));
    }

    private static Bench Stating(Channel channel, double gain, double? offset) => Shipped.Bench with
    {
        Channels =
        [
            .. Shipped.Bench.Channels.Select(setup => setup.Channel == channel
                ? setup with { Gain = gain, Offset = offset } : setup),
        ],
    };

    private static ZeroReading Of(Bench bench, params (Channel Channel, short[] Codes)[] traces) =>
        ZeroReading.Of([.. traces.Select(trace => Trace(trace.Channel, trace.Codes))], bench, Shipped.Rated, bank: 0);

    private static RawTrace Trace(Channel channel, short[] codes) =>
        new(channel, codes, 0, 1e-9, 1, 0, 0, -2048, 2047);
}
