using BenchRunner.Acceptance.Events;
using BenchRunner.Runner.Benches;

namespace BenchRunner.Runner.Exchanges;

/// <summary>Exchanges the device on a bench whose hands this program moves (a fake bench that it started).</summary>
/// <remarks>The loop must be seen open after the bus was proved down, and closed again; closing never energises by
/// itself.</remarks>
public sealed class Exchange(IHands hands, Enclosure enclosure, EventSource events, TimeProvider time)
{
    private static readonly TimeSpan Within = TimeSpan.FromSeconds(5);

    /// <summary>Opens, inserts the device, closes, and sees each in the interlock loop.</summary>
    /// <param name="device">Serial of the device that goes in.</param>
    /// <param name="cancel">Ends the exchange.</param>
    /// <exception cref="BenchException">The loop did not follow.</exception>
    public async Task Insert(string device, CancellationToken cancel)
    {
        int openings = enclosure.Openings;
        await hands.Do("open", cancel);
        await See(patience => enclosure.Opened(openings, patience), "open", cancel);
        await hands.Do($"insert {device}", cancel);
        await hands.Do("close", cancel);
        await See(enclosure.Closed, "closed", cancel);
        events.Say(Severity.Information, "device-exchanged", $"enclosure seen open and closed again; {device} is in "
            + $"the fixture");
    }

    private async Task See(Func<CancellationToken, Task> look, string what, CancellationToken cancel)
    {
        using var patience = new CancellationTokenSource(Within, time);
        using var both = CancellationTokenSource.CreateLinkedTokenSource(patience.Token, cancel);
        try
        {
            await look(both.Token);
        }
        catch (OperationCanceledException) when (!cancel.IsCancellationRequested)
        {
            throw new BenchException(
                $"the interlock loop was not seen {what} within {Within.TotalSeconds:0} s of the exchange");
        }
    }
}
