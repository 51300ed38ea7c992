using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Runner.Sessions;
using BenchRunner.Safety;
using BenchRunner.Safety.Supervision;

namespace BenchRunner.Runner.Exchanges;

/// <summary>Has a person confirm a closed enclosure. Closing never energises by itself, and what was confirmed before
/// an opening counts for nothing after it.</summary>
/// <param name="supervisor">Sees the loop, and holds the confirmation to it.</param>
/// <param name="person">Who is asked.</param>
/// <param name="clamps">Channels whose clamps a person degausses, by name.</param>
/// <param name="byHand">Waits for a closing where a person exchanges devices; null: an open loop ends the
/// session.</param>
/// <param name="events">Takes what happens.</param>
/// <param name="time">The clock.</param>
public sealed class Arming(
    SafetySupervisor supervisor,
    IOperator person,
    IReadOnlyList<string> clamps,
    ByHand? byHand,
    EventSource events,
    TimeProvider time)
{
    private static readonly Confirmation Void = new("", Asked: true);
    private readonly Enclosure _enclosure = new(supervisor, time);

    /// <summary>Asks until a confirmation holds.</summary>
    /// <returns>The confirmation; null where it was declined or there is nobody to ask.</returns>
    /// <exception cref="SafetyException">The loop is open and nobody is there to close it, or the bench has
    /// tripped.</exception>
    public async Task<Confirmation?> Confirm(Plan plan, string device, bool simulated, CancellationToken stop)
    {
        while (true)
        {
            await SeeClosed(simulated, stop);
            int openings = _enclosure.Openings;
            Confirmation? given = await Ask(
                plan, new Closing(device, simulated, openings > 0, clamps), openings, stop);
            if (supervisor.Trip is { } trip)
            {
                // The answer may have been quicker than the trip's waking.
                throw new SafetyException(trip.Reason);
            }

            if (given == Void || (given is not null && !supervisor.HoldConfirmed(openings)))
            {
                events.Say(
                    Severity.Warning, "confirmation-void",
                    "the enclosure was opened: nothing is confirmed; the question comes again after it is closed");
                continue;
            }

            return given;
        }
    }

    private async Task SeeClosed(bool simulated, CancellationToken stop)
    {
        if (_enclosure.IsClosed)
        {
            return;
        }

        if (byHand is null || !(simulated || person.CanAsk))
        {
            throw new SafetyException(
                "the interlock loop is open: close the enclosure and start again; nothing was energised");
        }

        await byHand.Closing(stop);
    }

    /// <summary>Asks; an opening does not wait for the answer.</summary>
    /// <returns>The confirmation; <see cref="Void"/> where the enclosure was opened meanwhile; null:
    /// declined.</returns>
    private async Task<Confirmation?> Ask(Plan plan, Closing closing, int openings, CancellationToken stop)
    {
        using var over = CancellationTokenSource.CreateLinkedTokenSource(stop);
        Task opened = EndOnOpening(over, openings);
        try
        {
            return await person.Confirm(plan, closing, over.Token);
        }
        catch (OperationCanceledException) when (!stop.IsCancellationRequested)
        {
            return Void;
        }
        finally
        {
            over.Cancel();
            await opened;
        }
    }

    private async Task EndOnOpening(CancellationTokenSource question, int openings)
    {
        try
        {
            await _enclosure.Opened(openings, question.Token);
            question.Cancel();
        }
        catch (OperationCanceledException)
        {
            // It was answered, or the run is over.
        }
    }
}
