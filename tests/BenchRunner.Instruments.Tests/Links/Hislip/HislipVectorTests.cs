using System.Globalization;
using System.Text.Json;
using BenchRunner.Instruments.Links.Hislip;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Links.Hislip;

/// <summary>The client's codec and rules against tests/reference/scpi/hislip.json: each case names its clause of
/// IVI-6.1; an independent protocol analyser read all messages alike.</summary>
public class HislipVectorTests
{
    private const string File = "hislip.json";

    public static TheoryData<string> Messages() => [.. Ids("messages")];

    public static TheoryData<string> Faults() => [.. Ids("faults")];

    [Fact]
    public void The_file_holds_64_messages_18_faults_and_4_sequences() => Assert.Equal(
        (64, 18, 4), (Ids("messages").Count(), Ids("faults").Count(), Ids("sequences").Count()));

    [Theory]
    [MemberData(nameof(Messages))]
    public void A_message_is_read_and_written_again_byte_for_byte(string id)
    {
        var one = ReferenceFile.Case(File, "messages", id);
        var bytes = ReferenceFile.Hex(one.GetProperty("hex").GetString()!);
        var expect = one.GetProperty("expect");
        for (var cut = 0; cut < HislipHeader.Size; cut++)
        {
            Assert.False(HislipHeader.TryRead(bytes.AsSpan(0, cut), out _));
        }

        Assert.True(HislipHeader.TryRead(bytes, out var header));
        Assert.Equal(expect.GetProperty("type").GetInt32(), (int)header.Type);
        Assert.Equal(expect.GetProperty("name").GetString(), header.Type.ToString());
        Assert.Equal(expect.GetProperty("control_code").GetInt32(), header.Control);
        Assert.Equal(Number(expect, "parameter"), header.Parameter);
        Assert.Equal(expect.GetProperty("payload_length").GetUInt64(), header.Length);
        Assert.Equal(bytes.Length - HislipHeader.Size, (int)header.Length);
        Assert.Null(header.Unknown);
        Fields(expect, header);

        var written = new byte[HislipHeader.Size];
        header.Write(written);
        Assert.Equal(bytes[..HislipHeader.Size], written);
    }

    [Theory]
    [MemberData(nameof(Faults))]
    public void A_faulty_input_is_named(string id)
    {
        var one = ReferenceFile.Case(File, "faults", id);
        var bytes = ReferenceFile.Hex(one.GetProperty("hex").GetString()!);
        var state = one.TryGetProperty("state", out var s) ? s.GetString()! : "";
        Assert.Equal(one.GetProperty("expect").GetProperty("error").GetString(), Word(Judge(bytes, state)));
    }

    [Fact]
    public void Identifiers_step_by_two_wrap_to_zero_and_start_anew_after_a_clear()
    {
        var z1 = ReferenceFile.Case(File, "sequences", "Z001");
        var ids = new HislipIds();
        Assert.Equal(Number(z1, "start"), ids.Next());
        foreach (var next in z1.GetProperty("next").EnumerateArray())
        {
            Assert.Equal(Number(next), ids.Next());
        }

        while (ids.Last != 0xffff_fffe)
        {
            ids.Next();
        }

        Assert.Equal(Number(z1, "after_0xfffffffe"), ids.Next());
        ids.Restart();
        Assert.Equal(
            Number(ReferenceFile.Case(File, "sequences", "Z002").GetProperty("next")[0]), ids.Next());
    }

    private static IEnumerable<string> Ids(string list) =>
        ReferenceFile.Cases(File, list).Select(c => c.GetProperty("id").GetString()!);

    private static uint Number(JsonElement element, string name) => Number(element.GetProperty(name));

    private static uint Number(JsonElement element) =>
        uint.Parse(element.GetString()!.AsSpan(2), NumberStyles.HexNumber, CultureInfo.InvariantCulture);

    private static void Fields(JsonElement expect, HislipHeader header)
    {
        if (header.Type == HislipType.InitializeResponse)
        {
            var terms = HislipTerms.Read(header);
            bool Said(string name) => expect.TryGetProperty(name, out var flag) && flag.GetBoolean();
            Assert.Equal(expect.GetProperty("version").GetString(), $"{terms.Major}.{terms.Minor}");
            Assert.Equal(expect.GetProperty("session_id").GetInt32(), terms.Session);
            Assert.Equal(Said("prefers_overlapped"), terms.PrefersOverlapped);
            Assert.Equal(Said("encryption_mandatory"), terms.EncryptionMandatory);
            Assert.Equal(Said("initial_encryption"), terms.InitialEncryption);
        }

        if (expect.TryGetProperty("message_id", out var id))
        {
            Assert.Equal(Number(id), header.Parameter);
        }

        if (expect.TryGetProperty("status_byte", out var status))
        {
            Assert.Equal(status.GetInt32(), header.Control);
        }

        if (expect.TryGetProperty("fatal", out var fatal))
        {
            Assert.Equal(fatal.GetBoolean(), header.Type == HislipType.FatalError);
        }
    }

    /// <summary>What the client's pure parts say of an input in a state.</summary>
    private static HislipFault? Judge(byte[] bytes, string state)
    {
        try
        {
            if (!HislipHeader.TryRead(bytes, out var header)
                || bytes.Length < HislipHeader.Size + (int)header.Length)
            {
                return HislipFault.Truncated;
            }

            if (header.Type == HislipType.InitializeResponse && state.Length == 0)
            {
                HislipTerms.Read(header).Check();
            }

            return header.Type == HislipType.AsyncMaximumMessageSizeResponse && header.Length != 8
                ? HislipFault.BadPayload
                : state.Contains("async", StringComparison.Ordinal)
                    ? HislipRules.JudgeAsynchronous(header, null)
                    : HislipRules.Judge(
                        header, 0xffff_ff02, clearing: state.Contains("clear", StringComparison.Ordinal));
        }
        catch (HislipException e)
        {
            return e.Fault;
        }
    }

    private static string Word(HislipFault? fault) => string.Concat(
        $"{fault}".Select((c, i) => char.IsUpper(c) && i > 0 ? $"-{char.ToLowerInvariant(c)}" : $"{char.ToLowerInvariant(c)}"));
}
