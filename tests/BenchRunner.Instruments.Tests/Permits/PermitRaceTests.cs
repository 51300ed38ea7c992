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

    private async Task Fire(ScpiSession session, Permit permit, int round)
    {
        while (true)
        {
            await session.Energise(permit, $"FIRE {round}", Cancel);
        }
    }
}
