using System.Diagnostics;
using System.Text;

namespace BenchRunner.Benchmarks;

/// <summary>What one whole run says to its instruments, and when: taken between the program and a fake bench as slow as
/// a lab's.</summary>
internal static class RunTraffic
{
    // Words of the generic dialects, in which a fake bench speaks.
    private const string Fires = "TRIGger:SEQuence:IMMediate";
    private const string AsksPreamble = "TRACe:PREamble?";
    private const string AsksTrace = "TRACe:DATA?";
    private const string AsksCount = "SENSe:SWEep:COUNt:ACTual?";

    /// <summary>Runs a device's whole sequence.</summary>
    /// <param name="seed">Seed of the fake bench.</param>
    /// <returns>Its captures that follow another one of the same operating point; or why there are none, e.g. on a machine
    /// too busy for the run's deadlines.</returns>
    public static (IReadOnlyList<CaptureTraffic> Captures, string? Ended) Take(int seed)
    {
        List<Said> said = [];
        var gate = new Lock();
        using (var run = new RelayedRun(seed, _ => { }, isPatient: true, (role, isAnswer, bytes) =>
        {
            double now = Stopwatch.GetTimestamp() / (double)Stopwatch.Frequency;
            lock (gate)
            {
                Note(said, role, isAnswer, bytes, now);
            }
        }))
        {
            if (run.UntilEnd() is { } why)
            {
                return ([], why);
            }

            lock (gate)
            {
                return (Captures([.. said]), null);
            }
        }
    }

    private static void Note(List<Said> said, string role, bool isAnswer, byte[] bytes, double now)
    {
        if (isAnswer)
        {
            // One question is under way on a link: what comes answers the last one.
            int last = said.FindLastIndex(message => message.Role == role && message.IsQuestion);
            if (last >= 0)
            {
                said[last] = said[last] with { Answered = now };
            }

            return;
        }

        string text = Encoding.ASCII.GetString(bytes);
        said.AddRange(text.Split('\n', StringSplitOptions.RemoveEmptyEntries).Select(m => new Said(role, m, now, now)));
    }

    private static List<CaptureTraffic> Captures(Said[] said)
    {
        int[] fired = [.. said.Index().Where(m => m.Item is { Role: "pulser", Text: Fires }).Select(m => m.Index)];
        List<CaptureTraffic> captures = [];
        foreach ((int from, int to) in fired.Zip(fired.Skip(1)))
        {
            Said[] between = said[from..to];

            // At another operating point the supply is set.
            if (between.Any(message => message is { Role: "supply", IsQuestion: false }))
            {
                continue;
            }

            Said[] scope = [.. between.Where(message => message.Role == "scope")];
            int first = Array.FindIndex(scope, m => m.Text.StartsWith(AsksPreamble, StringComparison.Ordinal));
            int last = Array.FindLastIndex(scope, m => m.Text == AsksCount);
            if (first < 0 || last < first)
            {
                // Its record was lost on a busy machine.
                continue;
            }

            Said[] reading = scope[first..(last + 1)];
            captures.Add(new CaptureTraffic(
                reading.Count(message => message.IsQuestion),
                reading.Count(message => message.Text.StartsWith(AsksTrace, StringComparison.Ordinal)),
                scope.Count(message => message.IsQuestion),
                said[to].At - said[from].At,
                said[to].At - scope[last + 1].At,
                reading[^1].Answered - reading[0].At));
        }

        return captures;
    }

    /// <summary>A message to an instrument.</summary>
    /// <param name="Role">Who it went to.</param>
    /// <param name="Text">It.</param>
    /// <param name="At">When it went, s.</param>
    /// <param name="Answered">When the last of its answer came, s.</param>
    private sealed record Said(string Role, string Text, double At, double Answered)
    {
        public bool IsQuestion => Text.Contains('?', StringComparison.Ordinal);
    }
}
