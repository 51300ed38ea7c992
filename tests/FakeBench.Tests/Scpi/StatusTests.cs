using System.Globalization;
using System.Text;
using System.Text.Json;
using FakeBench.Scpi;

namespace FakeBench.Tests.Scpi;

public sealed class StatusTests
{
    private readonly Interpreter _scpi = new(() => "A,B,0,1", () => { });

    public static TheoryData<string, int, string, int> Table() => new(
        ScpiReference.Cases("errors.json", "table").Select(c => (
            c.Text("id"),
            c.GetProperty("number").GetInt32(),
            c.Text("text"),
            c.GetProperty("esr_bit") is { ValueKind: JsonValueKind.Number } bit ? bit.GetInt32() : -1)));

    [Theory]
    [MemberData(nameof(Table))]
    public void A_number_has_the_standards_text_and_event_bit(string id, int number, string text, int bit)
    {
        Assert.Equal(text, StandardErrors.Text(number));
        Assert.True(bit == (StandardErrors.EventBit(number) ?? -1), id);
    }

    // The comments name cases of tests/reference/scpi/errors.json, "behaviour".
    [Fact] // B001
    public void The_queue_gives_the_oldest_first()
    {
        _scpi.Obey("FOO");
        _scpi.Obey("*ESE 256");
        Assert.StartsWith("-113,", Ask("SYST:ERR?"), StringComparison.Ordinal);
        Assert.StartsWith("-222,", Ask("SYST:ERR?"), StringComparison.Ordinal);
        Assert.Equal("0,\"No error\"", Ask("SYST:ERR?"));
    }

    [Fact] // B002
    public void An_overflowing_queue_keeps_the_oldest_and_ends_in_350()
    {
        _scpi.Obey("*ESE 256");
        for (int i = 0; i < 40; i++)
        {
            _scpi.Obey("FOO");
        }

        Assert.Equal(ErrorList.Capacity.ToString(CultureInfo.InvariantCulture), Ask("SYST:ERR:COUN?"));
        string[] entries = [.. Enumerable.Range(0, ErrorList.Capacity).Select(_ => Ask("SYST:ERR?"))];
        Assert.StartsWith("-222,", entries[0], StringComparison.Ordinal);
        Assert.All(entries[1..^1], e => Assert.StartsWith("-113,", e, StringComparison.Ordinal));
        Assert.Equal("-350,\"Queue overflow\"", entries[^1]);
        Assert.Equal("0,\"No error\"", Ask("SYST:ERR?"));
    }

    [Fact] // B003
    public void Clear_empties_queue_and_events_and_leaves_enables()
    {
        _scpi.Obey("*ESE 60;*SRE 32;FOO");
        _scpi.Status.Operation.SetCondition(8);
        _scpi.Obey("*CLS");
        Assert.Equal("0;0;0;60;32", Ask("SYST:ERR:COUN?;*ESR?;:STAT:OPER?;*ESE?;*SRE?"));
    }

    [Fact] // B004
    public void Reset_leaves_queue_events_and_enables()
    {
        _scpi.Obey("*CLS;*ESE 60;FOO;*RST");
        Assert.Equal("1;32;60", Ask("SYST:ERR:COUN?;*ESR?;*ESE?"));
    }

    [Fact] // B005
    public void Status_bit_2_stands_until_the_queue_is_empty()
    {
        _scpi.Obey("FOO");
        Assert.Equal("4", Ask("*STB?"));
        Ask("SYST:ERR?");
        Assert.Equal("0", Ask("*STB?"));
    }

    [Fact] // B006, B008
    public void Reading_the_event_register_clears_it()
    {
        Assert.Equal("128", Ask("*ESR?")); // power on, IEEE 488.2, 11.5.1
        _scpi.Obey("FOO");
        Assert.Equal("32", Ask("*ESR?"));
        Assert.Equal("0", Ask("*ESR?"));
    }

    [Fact] // B007
    public void An_enabled_event_reaches_the_master_summary()
    {
        _scpi.Obey("*CLS;*ESE 60;*SRE 32;FOO");
        Ask("SYST:ERR?");
        Assert.Equal("96", Ask("*STB?"));
    }

    [Fact]
    public void A_reply_that_waits_shows_as_message_available() =>
        Assert.Equal("1;16", Ask("*OPC?;*STB?")); // bit 4, IEEE 488.2, 11.2

    [Fact]
    public void A_register_latches_what_rose_until_it_is_read()
    {
        _scpi.Obey("STAT:OPER:ENAB 32");
        _scpi.Status.Operation.SetCondition(32);
        _scpi.Status.Operation.SetCondition(0);
        Assert.Equal("128;0;32;0;0", Ask("*STB?;STAT:OPER:COND?;EVEN?;EVEN?;:STAT:QUES?"));
    }

    [Fact]
    public void Bit_15_of_a_register_and_bit_6_of_the_request_mask_do_not_exist()
    {
        _scpi.Obey("STAT:QUES:ENAB 65535;*SRE 255");
        Assert.Equal("32767;191", Ask("STAT:QUES:ENAB?;*SRE?")); // SCPI-1999 volume 2, 20; IEEE 488.2, 11.3
        _scpi.Obey("STAT:PRES");
        Assert.Equal("0", Ask("STAT:QUES:ENAB?"));
    }

    [Fact]
    public void The_common_queries_answer() =>
        Assert.Equal("A,B,0,1;0;1999.0", Ask("*IDN?;*TST?;:SYST:VERS?"));

    [Fact]
    public void After_a_faulty_unit_the_rest_is_obeyed() => Assert.Equal("1", Ask("FOO;*OPC?"));

    [Fact]
    public void A_detail_is_quoted_and_cut_to_255_characters()
    {
        _scpi.Status.Report(-102, "near \"VOLT\"");
        Assert.Equal("-102,\"Syntax error;near \"\"VOLT\"\"\"", Ask("SYST:ERR?")); // errors.json, Q008
        _scpi.Status.Report(-102, new string('x', 400));
        Assert.Equal("-102,\"".Length + 255 + 1, Ask("SYST:ERR?").Length);
    }

    private string Ask(string message) => Encoding.Latin1.GetString(_scpi.Obey(message).Finish()).TrimEnd('\n');
}
