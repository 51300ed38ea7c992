using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Validity;

public sealed class MeasuredEnvelopeTests
{
    private static readonly DeviceRatings Ratings = new(1200, 160, -8, 22, 175);

    [Theory]
    [InlineData(Channel.VdsLow, 1199, null)]
    [InlineData(Channel.VdsLow, 1201, "blocking voltage")]
    [InlineData(Channel.VdsHigh, 1300, "blocking voltage")]
    [InlineData(Channel.IdLow, 159, null)]
    [InlineData(Channel.IdLow, 165, "peak current")]
    [InlineData(Channel.IdLow, -165, "peak current")]
    [InlineData(Channel.Vbus, 5000, null)]
    public void A_train_beyond_a_rating_of_the_device_is_found(Channel channel, double peak, string? rating)
    {
        // One code a volt or ampere, no offset; the shipped bench states gain 1.
        var trace = new RawTrace(channel, [0, 0, (short)peak, 0], 0, 1e-9, 1, 0, 0, short.MinValue, short.MaxValue);

        string? exceeded = MeasuredEnvelope.Exceeded([trace], Shipped.Bench, Ratings);

        if (rating is null)
        {
            Assert.Null(exceeded);
        }
        else
        {
            Assert.Contains(rating, exceeded, StringComparison.Ordinal);
            Assert.Contains(channel.Name(), exceeded, StringComparison.Ordinal);
        }
    }
}
