using System.Globalization;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Benches;

/// <summary>What must hold between the keys of a bench file.</summary>
internal static class BenchRules
{
    private const string StartedTcp = "tcp 127.0.0.1:0";
    private const string AutomaticSerial = "serial auto";

    /// <summary>Checks what is sound of a file.</summary>
    /// <param name="file">The file's values.</param>
    /// <param name="problems">Takes what is wrong.</param>
    public static void Check(Fields file, List<Problem> problems)
    {
        Fields roles = file.Block("roles");
        foreach (string role in roles.Keys)
        {
            Link(role, roles.Block(role), file.IsWritten("fake"), problems);
        }

        Ceiling(file, roles, problems);
        Patience(file.Block("safety"), problems);
        Fields channels = file.Block("channels");
        ChannelKeys.Check(channels, problems);
        Inputs(channels, problems);
        bool isDescribed = file.IsWritten("shunt");
        foreach (string name in channels.Keys)
        {
            if (isDescribed || channels.Block(name).Text("probe") != "shunt")
            {
                continue;
            }

            problems.Add(new Problem(
                channels.Block(name).Of("probe"),
                $"{name} is measured by a shunt that is not described",
                "a block shunt",
                "add shunt: { resistance: 5 mOhm, inductance: 200 pH } with its own values"));
        }
    }

    private static void Ceiling(Fields file, Fields roles, List<Problem> problems)
    {
        Fields envelope = file.Block("envelope");
        if (file.IsWritten("envelope") && roles.IsWritten("hotplate") && !envelope.IsWritten("temperature"))
        {
            problems.Add(new Problem(
                file.KeyOf("envelope"),
                "envelope states no temperature and the bench has a hotplate",
                "the highest temperature that plate and fixture bear",
                "add temperature: 150 degC with its own value"));
        }
    }

    /// <summary>The watch must have given an instrument up, and said so, before the guardian gives the watch up.</summary>
    private static void Patience(Fields safety, List<Problem> problems)
    {
        double reply = safety.Number("reply-within") ?? SafetySettings.Usual.ReplyWithin;
        double silence = safety.Number("guardian-silence") ?? SafetySettings.Usual.GuardianSilence;
        double least = reply + SafetySettings.SilenceBeyondReply;
        if (silence < least - 1e-9)
        {
            string written = safety.IsWritten("guardian-silence") ? "guardian-silence" : "reply-within";
            problems.Add(new Problem(
                safety.Of(written),
                $"guardian-silence is {SiText.Format(silence, "s", 3)} and reply-within {SiText.Format(reply, "s", 3)}",
                $"a guardian-silence of {SiText.Format(least, "s", 3)} or more: the guardian must not end a run whose watch "
                    + "still waits for a reply",
                "change one of the two"));
        }
    }

    private static void Link(string role, Fields setup, bool isFake, List<Problem> problems)
    {
        if (setup.Text("link") is not { } link)
        {
            return;
        }

        int? port = PortOf(link);
        bool isStarted = link is StartedTcp or AutomaticSerial;
        if (port > ushort.MaxValue)
        {
            problems.Add(new Problem(
                setup.Of("link"),
                $"the port of {role} is {port}",
                $"a port from 1 to {ushort.MaxValue}",
                "correct it"));
        }
        else if (isFake && !isStarted)
        {
            // A real instrument among simulated ones would be energised by a run that believes everything is fake.
            problems.Add(new Problem(
                setup.Of("link"),
                $"{role} of a fake bench is reached by {Shown.Quote(link)}",
                $"'{StartedTcp}' or '{AutomaticSerial}', since run starts all its instruments",
                "write that, or remove the block fake"));
        }
        else if (!isFake && (port == 0 || link == AutomaticSerial))
        {
            problems.Add(new Problem(
                setup.Of("link"),
                $"{role} is reached by {Shown.Quote(link)}, which is for a fake bench",
                "where the instrument is",
                "write its port or device, or add the block fake"));
        }
    }

    private static int? PortOf(string link) => link.StartsWith("tcp ", StringComparison.Ordinal)
        ? int.Parse(link.AsSpan(link.LastIndexOfAny([':', ' ']) + 1), NumberStyles.None, CultureInfo.InvariantCulture)
        : null;

    private static void Inputs(Fields channels, List<Problem> problems)
    {
        var taken = new Dictionary<int, string>();
        foreach (string name in channels.Keys)
        {
            Fields channel = channels.Block(name);
            if (channel.Whole("scope") is { } input && !taken.TryAdd(input, name))
            {
                problems.Add(new Problem(
                    channel.Of("scope"),
                    $"{name} is on input {input} of the scope, as is {taken[input]}",
                    "an input of its own for each channel",
                    "correct the one that is wrong"));
            }
        }
    }
}
