using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;

namespace BenchRunner.Runner.Exchanges;

/// <summary>Exchanges the device on a bench whose hands this program moves (a fake bench that it started).</summary>
/// <remarks>The loop must be seen open after the bus was proved down, and closed again; closing never energises by
/// itself.</remarks>
public sealed class Exchange(IHands hands, IInterlock interlock, EventSource events, TimeProvider time)
{
    private static readonly TimeSpan Within = TimeSpan.FromSeconds(5);
    private static readonly TimeSpan ReadEvery = TimeSpan.FromMilliseconds(20);

    /// <summary>Opens, inserts the device, closes, and sees each in the interlock loop.</summary>
    /// <param name="device">Serial of the device that goes in.</param>
    /// <param name="cancel">Ends the exchange.</param>
    /// <exception cref="BenchException">The loop did not follow.</exception>
    public async Task Insert(string device, CancellationToken cancel)
    {
        await hands.Do("open", cancel);
        await See(closed: false, cancel);
        await hands.Do($"insert {device}", cancel);
        await hands.Do("close", cancel);
        await See(closed: true, cancel);
        events.Say(Severity.Information, "device-exchanged", $"enclosure seen open and closed again; {device} is in "
            + $"the fixture");
    }

    private async Task See(bool closed, CancellationToken cancel)
    {
        long start = time.GetTimestamp();
        while ((await interlock.Read(cancel)).LoopClosed != closed)
        {
            if (time.GetElapsedTime(start) > Within)
            {
                throw new BenchException(
                    $"the interlock loop was not seen {(closed ? "closed" : "open")} within {Within.TotalSeconds:0} s "
                        + $"of the exchange");
            }

            await Task.Delay(ReadEvery, time, cancel);
        }
    }
}
