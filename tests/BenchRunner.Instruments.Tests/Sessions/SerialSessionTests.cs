using System.Text;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Sessions;

/// <summary>A session over a real pseudo terminal.</summary>
public class SerialSessionTests
{
    private static readonly SessionOptions Options = new()
    {
        ReplyWithin = TimeSpan.FromHours(1),
        Silence = TimeSpan.FromSeconds(1),
        WriteWithin = TimeSpan.FromSeconds(30),
        ReadAttempts = 1,
    };

    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;

    [Fact]
    public async Task What_an_earlier_user_left_on_the_line_answers_nothing_of_ours()
    {
        Assert.SkipUnless(OperatingSystem.IsLinux(), "needs a pseudo terminal");
        using var terminal = new Terminal();
        var clock = new Clock();
        var log = new Recorder();
        var late = true;
        Serve(terminal, line =>
        {
            if (line.StartsWith("*ESE ", StringComparison.Ordinal))
            {
                // The reply that an earlier user did not wait for comes before the first answer to us.
                var stale = late ? "SOMEONE,ELSE,9,9\n" : "";
                late = false;
                return stale + line[5..line.IndexOf(';', StringComparison.Ordinal)] + "\n";
            }

            return line switch
            {
                "*IDN?" => "MAKER,INTERLOCK,1,1\r\n",
                "SYSTem:ERRor?" => "0,\"No error\"\n",
                "B?" => "2\n",
                _ => "",
            };
        });

        var open = ScpiSession.Open(
            "interlock", LinkAddress.Parse($"serial {terminal.Path}"), Options, clock, log, _cancel);
        await clock.PassUntil(Options.Silence, () => open.IsCompleted);
        using var session = await open;

        Assert.Equal("INTERLOCK", session.Identity.Model);
        Assert.Equal(2, await session.Ask("B?", ReplyNumber.Parse, _cancel));
        Assert.True(log.Has(InstrumentEventKind.Resynchronised));
        session.SendNow("BYE");
    }

    /// <summary>Answers lines on a thread of its own until it reads BYE.</summary>
    private static void Serve(Terminal terminal, Func<string, string> answer) => new Thread(() =>
    {
        var buffer = new byte[256];
        var held = "";
        while (true)
        {
            held += Encoding.ASCII.GetString(buffer, 0, terminal.Read(buffer));
            while (held.IndexOf('\n', StringComparison.Ordinal) is >= 0 and var end)
            {
                var line = held[..end];
                held = held[(end + 1)..];
                if (line == "BYE")
                {
                    return;
                }

                terminal.Write(Encoding.ASCII.GetBytes(answer(line)));
            }
        }
    })
    { IsBackground = true }.Start();
}
