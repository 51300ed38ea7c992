using BenchRunner.Acceptance.Events;

namespace BenchRunner.Runner.Exchanges;

/// <summary>Exchanges the device on a bench where a person does it: the enclosure must be seen open after the bus was
/// proved down, and closed again.</summary>
/// <remarks>Nothing is energised meanwhile, so a person may take any time; a line every minute says what is waited
/// for. Whether the part was really exchanged is not to be seen here.</remarks>
public sealed class ByHand(Enclosure enclosure, EventSource events, TimeProvider time)
{
    private static readonly TimeSpan RemindEvery = TimeSpan.FromMinutes(1);

    /// <summary>Waits until the enclosure was opened and is closed.</summary>
    /// <param name="before">Serial of the device that comes out.</param>
    /// <param name="device">Serial of the device that goes in.</param>
    /// <param name="openings">Count of openings when the bus was proved down: the enclosure may be open
    /// already.</param>
    /// <param name="cancel">Ends the waiting.</param>
    public async Task Exchange(string before, string device, int openings, CancellationToken cancel)
    {
        events.Say(
            Severity.Information, "exchange",
            $"open the enclosure, take {before} out, put {device} in, close the enclosure");
        await Reminding(enclosure.Opened(openings, cancel), "opened");
        events.Say(Severity.Information, "enclosure-open", "enclosure seen open");
        await Reminding(enclosure.Closed(cancel), "closed");
        events.Say(
            Severity.Information, "device-exchanged", $"enclosure seen open and closed again; {device} is the next");
    }

    /// <summary>Waits until an enclosure that is open is closed.</summary>
    public async Task Closing(CancellationToken cancel)
    {
        if (!enclosure.IsClosed)
        {
            events.Say(Severity.Warning, "enclosure-open", "the enclosure is open; close it");
            await Reminding(enclosure.Closed(cancel), "closed");
        }
    }

    private async Task Reminding(Task seen, string what)
    {
        while (await Task.WhenAny(seen, Task.Delay(RemindEvery, time)) != seen)
        {
            events.Say(
                Severity.Warning, "exchange-waits",
                $"the enclosure was not {what} yet; nothing is energised; Ctrl-C ends the run");
        }

        await seen;
    }
}
