using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;
using BenchRunner.Instruments.Tests.Sessions;

namespace BenchRunner.Instruments.Tests.Permits;

public class PermitRaceTests : SessionFixture
{
    [Fact]
    public async Task When_revoking_has_returned_nothing_that_energises_goes_out_any_more()
    {
        using var session = await Open();
        Instrument.On("FIRE *", _ => Task.CompletedTask);
        Instrument.On("MARK *", _ => Task.CompletedTask);
        var random = new Random(7);
        for (var round = 0; round < 50; round++)
        {
            var permit = Grants.Live();
            var sent = random.Next(0, 6);
            var before = Instrument.Received.Length;
            var firing = Fire(session, permit, round);
            await Clock.Until(() => Instrument.Received.Length >= before + sent);
            Grants.Revoke(permit, "interlock open");
            session.SendNow($"MARK {round}");
            await Assert.ThrowsAsync<PermitException>(() => firing);
        }

        // Both go through one socket, so the order of arrival is the order of writing.
        await Ask(session, "B?");
        var lines = Instrument.Received;
        Assert.True(lines.Count(l => l.StartsWith("FIRE", StringComparison.Ordinal)) > 20, "the race was never run");
        for (var round = 0; round < 50; round++)
        {
            Assert.DoesNotContain($"FIRE {round}", lines[(Array.IndexOf(lines, $"MARK {round}") + 1)..]);
        }
    }

    [Fact]
    public async Task The_write_itself_is_made_under_the_lock_that_revoking_takes()
    {
        // A write that fails is reported where it fails. Where the connection's end reaches us only after the write,
        // the
        // next round tries again.
        var held = false;
        for (var round = 0; round < 20 && !held; round++)
        {
            Visitor? visitor = null;
            Instrument.Once("WHO?", v =>
            {
                visitor = v;
                return v.Line("1");
            });
            using var session = await Open();
            await session.Set("VOLT 1", Cancel);
            await Ask(session, "WHO?");
            visitor!.Reset();
            var permit = Grants.Live();
            Log.Witness = _ => held |= Grants.IsHeld(permit);
            await Assert.ThrowsAsync<LinkException>(() => session.Energise(permit, "FIRE", Cancel));
            Log.Witness = null;
        }

        Assert.True(held);
    }

    private async Task Fire(ScpiSession session, Permit permit, int round)
    {
        while (true)
        {
            await session.Energise(permit, $"FIRE {round}", Cancel);
        }
    }
}
