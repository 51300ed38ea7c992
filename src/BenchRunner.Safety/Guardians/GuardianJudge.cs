using System.Diagnostics;

namespace BenchRunner.Safety.Guardians;

/// <summary>When the guardian acts. Pure: knows what was heard and when, and nothing else.</summary>
/// <remarks>
/// Silence counts from the first beat: before it nothing is energised, since no permit is granted. An end without a
/// word is never an end of work, whatever came before it.
/// </remarks>
public sealed class GuardianJudge(GuardianOptions options)
{
    private TimeSpan? _lastBeat;
    private TimeSpan? _makingSafeSince;

    /// <summary>When silence will have lasted too long; null: it does not count yet.</summary>
    public TimeSpan? ActsAt => _lastBeat + options.Silence;

    /// <summary>Why it acts; empty as long as it does not.</summary>
    public string Reason { get; private set; } = "";

    /// <summary>Judges what was heard.</summary>
    /// <param name="heard">What came.</param>
    /// <param name="now">When, on a monotonic clock.</param>
    public GuardianDeed On(Heard heard, TimeSpan now)
    {
        ArgumentNullException.ThrowIfNull(heard);
        switch (heard.Kind)
        {
            case HeardKind.Polled:
                (_lastBeat, _makingSafeSince) = (now, null);
                return GuardianDeed.Listen;
            case HeardKind.MakingSafe:
                return OnMakingSafe(heard, now);
            case HeardKind.Done:
                return GuardianDeed.Leave;
            case HeardKind.Left:
                return Because("the run left without proof that the bus is down", GuardianDeed.TakeOver);
            case HeardKind.Malformed:
                return Because($"what came is no heartbeat: '{heard.Text}'", GuardianDeed.Act);
            case HeardKind.Ended:
                return Because("the runner's pipe has closed: it has died", GuardianDeed.Act);
            default:
                throw new UnreachableException();
        }
    }

    /// <summary>Judges silence.</summary>
    /// <param name="now">Now, on the same clock.</param>
    public GuardianDeed OnSilence(TimeSpan now) => now < ActsAt || ActsAt is null
        ? GuardianDeed.Listen
        : Because(
            $"no heartbeat for {(now - _lastBeat!.Value).TotalMilliseconds:0} ms, expected one within "
                + $"{options.Silence.TotalMilliseconds:0} ms: the runner hangs or is stopped",
            GuardianDeed.Act);

    private GuardianDeed OnMakingSafe(Heard heard, TimeSpan now)
    {
        _lastBeat = now;
        if (_makingSafeSince is not null && Math.Max(heard.Commanded, heard.Seen) < options.DownBelow)
        {
            _makingSafeSince = now;
        }

        if (_makingSafeSince is not { } since)
        {
            _makingSafeSince = now;
            return GuardianDeed.SwitchOff;
        }

        return now - since <= options.MakingSafeWithin
            ? GuardianDeed.Listen
            : Because(
                $"the runner is on its way to the safe state for {(now - since).TotalSeconds:0.0} s, planned are "
                    + $"{options.MakingSafeWithin.TotalSeconds:0.0} s at most",
                GuardianDeed.Act);
    }

    private GuardianDeed Because(string reason, GuardianDeed deed)
    {
        Reason = reason;
        return deed;
    }
}
