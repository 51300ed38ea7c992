using System.Text;
using CsCheck;
using FakeBench.Scpi;

namespace FakeBench.Tests.Scpi;

public sealed class StreamTests
{
    private static readonly byte[] Several = "*IDN?\nA #15a\nb\n;;VOLT 1\r\nB \"x;y\"\n"u8.ToArray();

    [Fact]
    public void Messages_are_the_same_wherever_the_stream_is_cut()
    {
        List<string?> expected = ["*IDN?", "A #15a\nb\n;;VOLT 1\r", "B \"x;y\""];
        for (int cut = 0; cut <= Several.Length; cut++)
        {
            var framer = new MessageFramer();
            List<string?> seen = [.. framer.Take(Several.AsSpan(0, cut)), .. framer.Take(Several.AsSpan(cut))];
            Assert.Equal(expected, seen);
        }
    }

    [Fact]
    public void A_message_without_end_is_dropped_and_the_next_one_is_heard()
    {
        var framer = new MessageFramer();
        byte[] endless = new byte[MessageFramer.LongestMessage * 2];
        Array.Fill(endless, (byte)'x');
        Assert.Empty(framer.Take(endless));
        Assert.Equal([null, "*IDN?"], framer.Take("yy\n*IDN?\n"u8));
    }

    [Fact]
    public void A_missing_quote_swallows_one_message_only() =>
        Assert.Equal(["A \"open", "*IDN?"], new MessageFramer().Take("A \"open\n*IDN?\n"u8));

    [Fact]
    public void No_bytes_make_the_interpreter_throw() =>
        Gen.Char[(char)0, (char)255].Array[0, 60].Select(c => new string(c)).Sample(text =>
        {
            var scpi = new Interpreter(() => "", () => { });
            scpi.Commands.Number("VOLTage", new NumericRange(0, 5, 0, "V"), (_, _) => { }, _ => 1);
            foreach (string? message in new MessageFramer().Take(Encoding.Latin1.GetBytes($"VOLT {text}\n{text}\n")))
            {
                scpi.Obey(message!);
            }
        });

    [Fact]
    public void A_block_says_how_long_it_is()
    {
        var reply = new Reply();
        reply.Say("1");
        reply.SayBlock(new byte[12]);
        Assert.Equal("1;#212" + new string('\0', 12) + "\n", Encoding.ASCII.GetString(reply.Finish()));
    }
}
