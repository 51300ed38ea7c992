using System.Globalization;
using System.Text;
using System.Text.Json;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Replies;

/// <summary>Source of every expectation: tests/reference/scpi/response-parsing.json and errors.json.</summary>
public class ReferenceCaseTests
{
    private const string Responses = "response-parsing.json";

    public static TheoryData<string> Ids =>
        [.. ReferenceFile.Cases(Responses, "cases").Select(c => c.GetProperty("id").GetString()!)];

    public static TheoryData<string> ErrorIds =>
        [.. ReferenceFile.Cases("errors.json", "replies").Select(c => c.GetProperty("id").GetString()!)];

    [Fact]
    public void No_case_is_left_out() => Assert.Equal((189, 20), (Ids.Count, ErrorIds.Count));

    [Theory]
    [MemberData(nameof(Ids))]
    public void A_reply_gives_its_value_or_its_fault(string id)
    {
        var one = ReferenceFile.Case(Responses, "cases", id);
        var expect = one.GetProperty("expect");
        Assert.Equal(Expected(expect), Outcome(one, ReferenceFile.Input(one), 0));
    }

    [Theory]
    [MemberData(nameof(Ids))]
    public void A_stream_split_anywhere_gives_the_same(string id)
    {
        var one = ReferenceFile.Case(Responses, "cases", id);
        var input = ReferenceFile.Input(one);
        var whole = Outcome(one, input, 0);
        for (var piece = 1; piece <= input.Length; piece++)
        {
            Assert.Equal(whole, Outcome(one, input, piece));
        }
    }

    [Theory]
    [MemberData(nameof(ErrorIds))]
    public void An_entry_of_the_error_queue_gives_number_text_and_detail(string id)
    {
        var one = ReferenceFile.Case("errors.json", "replies", id);
        var expect = one.GetProperty("expect");
        var outcome = Caught(() =>
        {
            var entry = ErrorEntry.Parse(ReferenceFile.Input(one));
            return $"{entry.Number}|{entry.Text ?? "null"}|{entry.Detail ?? "null"}";
        });
        Assert.Equal(
            expect.TryGetProperty("error", out var error)
                ? "error " + error.GetString()
                : $"{expect.GetProperty("number")}|{expect.GetProperty("text").GetString() ?? "null"}|"
                    + $"{expect.GetProperty("detail").GetString() ?? "null"}",
            outcome);
    }

    private static string Expected(JsonElement expect) =>
        expect.TryGetProperty("error", out var error) ? "error " + error.GetString()
        : expect.TryGetProperty("value_hex", out var hex) ? Convert.ToHexString(ReferenceFile.Hex(hex.GetString()!))
        : expect.TryGetProperty("values_hex", out var all)
            ? string.Join('|', all.EnumerateArray().Select(h => Convert.ToHexString(ReferenceFile.Hex(h.GetString()!))))
        : Shown(expect.GetProperty("value"));

    private static string Shown(JsonElement value) => value.ValueKind switch
    {
        JsonValueKind.Array => string.Join('|', value.EnumerateArray().Select(Shown)),
        JsonValueKind.Number => Shown(value.GetDouble()),
        JsonValueKind.True => "yes",
        JsonValueKind.False => "no",
        JsonValueKind.Null => "",
        JsonValueKind.Object => string.Join('|', value.EnumerateObject().Select(p => Shown(p.Value))),
        _ => value.GetString()!,
    };

    private static string Shown(double number) => number switch
    {
        double.NaN => "nan",
        double.PositiveInfinity => "overload+",
        double.NegativeInfinity => "overload-",
        0 => "0",
        _ => number.ToString("R", CultureInfo.InvariantCulture),
    };

    private static string Outcome(JsonElement one, byte[] input, int piece) => Caught(() =>
    {
        var count = one.TryGetProperty("count", out var n) ? n.GetInt32() : 0;
        return one.GetProperty("as").GetString() switch
        {
            "integer" => Shown(ReplyInteger.Parse(input)),
            "number" => Shown(ReplyNumber.Parse(input)),
            "boolean" => ReplyWord.ParseBoolean(input) ? "yes" : "no",
            "character" => ReplyWord.Parse(input),
            "string" => ReplyString.Parse(input),
            "string-frame" => ReplyString.Parse(Encoding.UTF8.GetBytes(Lines(input, piece, quoted: true).Single())),
            "numbers" => string.Join('|', ReplyList.Numbers(input, count).Select(Shown)),
            "units" => string.Join('|', ReplyList.Units(input, count)),
            "lines" => string.Join('|', Lines(input, piece, quoted: false)),
            "block-frame" => Blocks(one, input, piece, count),
            "array" => string.Join('|', Array(one, input).Select(Shown)),
            "idn" => Identity(input),
            var other => throw new InvalidOperationException($"no reading for '{other}'"),
        };
    });

    private static string Identity(byte[] input)
    {
        var identity = ReplyIdentity.Parse(input);
        return $"{identity.Maker}|{identity.Model}|{identity.Serial}|{identity.Firmware}";
    }

    private static double[] Array(JsonElement one, byte[] input)
    {
        var order = one.GetProperty("border").GetString() == "SWAPped" ? ByteOrder.Swapped : ByteOrder.Normal;
        var format = one.GetProperty("format").GetString() switch
        {
            "INTeger,8" => ElementFormat.Integer8,
            "UINTeger,8" => ElementFormat.Unsigned8,
            "INTeger,16" => ElementFormat.Integer16,
            "UINTeger,16" => ElementFormat.Unsigned16,
            "REAL,32" => ElementFormat.Real32,
            "REAL,64" => ElementFormat.Real64,
            var other => throw new InvalidOperationException($"no format '{other}'"),
        };
        if (format == ElementFormat.Integer16)
        {
            // The scope's own way must agree with the general one.
            Assert.Equal(
                ReplyArray.Numbers(input, format, order), ReplyArray.Codes(input, order).Select(c => (double)c));
        }

        return ReplyArray.Numbers(input, format, order);
    }

    /// <summary>Lines of a stream that comes in pieces of the given length and then ends.</summary>
    private static List<string> Lines(byte[] input, int piece, bool quoted)
    {
        var lines = new List<string>();
        var start = 0;
        for (var end = Next(0, piece, input.Length); ; end = Next(end, piece, input.Length))
        {
            while (ReplyLine.TryRead(input.AsSpan(start, end - start), quoted, out var reply, out var consumed))
            {
                lines.Add(Encoding.UTF8.GetString(input.AsSpan(start, end - start)[reply]));
                start += consumed;
            }

            if (end == input.Length)
            {
                break;
            }
        }

        return input.AsSpan(start).ContainsAnyExcept((byte)'\r') || (lines.Count == 0 && start < input.Length)
            ? throw new ReplyException(ReplyFault.Unterminated, input.AsSpan(start))
            : lines;
    }

    private static string Blocks(JsonElement one, byte[] input, int piece, int count)
    {
        var bound = one.TryGetProperty("bound", out var b) ? b.GetInt32() : BlockHeader.Limit;
        if (one.TryGetProperty("transport", out var transport) && transport.GetString() == "hislip")
        {
            return Convert.ToHexString(IndefiniteBlock.Read(input));
        }

        using var reader = new BlockReader();
        reader.Begin(bound, Math.Max(count, 1));
        for (var taken = 0; taken < input.Length && !reader.IsWhole;)
        {
            var next = Math.Min(reader.Space.Length, Next(taken, piece, input.Length) - taken);
            input.AsSpan(taken, next).CopyTo(reader.Space.Span);
            reader.Advance(next);
            taken += next;
        }

        return reader.IsWhole
            ? string.Join(
                '|', Enumerable.Range(0, Math.Max(count, 1)).Select(i => Convert.ToHexString(reader.Block(i))))
            : throw reader.Missing();
    }

    private static int Next(int at, int piece, int length) => piece == 0 ? length : Math.Min(at + piece, length);

    private static string Caught(Func<string> read)
    {
        try
        {
            return read();
        }
        catch (ReplyException e)
        {
            // TooLong becomes too-long: the words of the file are the names of the faults.
            return "error " + string.Concat(e.Fault.ToString().Select((c, i) =>
                char.IsUpper(c) ? (i > 0 ? "-" : "") + char.ToLowerInvariant(c) : c.ToString()));
        }
    }
}
