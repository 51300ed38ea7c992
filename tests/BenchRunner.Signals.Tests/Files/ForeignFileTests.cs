using System.Globalization;
using System.IO.Compression;
using System.Text;
using BenchRunner.Signals.Files;
using BenchRunner.Signals.Traces;
using CsCheck;

namespace BenchRunner.Signals.Tests.Files;

/// <summary>Files as instruments and people write them; all styles are made up here.</summary>
public sealed class ForeignFileTests
{
    [Theory]
    [InlineData("Recorder,made up\nSource,vds_low\nvds_low,on screen 2\nt,vds_low\n0,5\n1e-9,6\n")]
    [InlineData("\"Record Length\",2,\n\"Sample Interval\",1e-9,\n\nTIME,vds_low,\n0,5,\n1e-9,6,\n")]
    [InlineData("# made by hand\n# interval: 7 s\nTime (s)\tvds_low\n0\t5\n1e-9\t6\n")]
    [InlineData("Time,12:30:45\nDate,1-2-3\n;;\nt;vds_low\n[s];[V]\n0,0;5,0\n1e-9;6\n;\n \n")]
    [InlineData("\uFEFFt , vds_low \r\nSECONDS,VOLTS\r\n0,+5.\r\n1E-9,.6E+1\r\n,,\r\n")]
    public void Lines_before_the_table_do_not_hide_it(string text)
    {
        Waveform waveform = Good(text);

        Assert.Equal((0, 1e-9), (waveform.TimeOrigin, waveform.SampleInterval));
        Assert.Equal([5, 6], waveform[Channel.VdsLow].ToArray());
    }

    [Fact]
    public void A_mapped_name_in_the_lines_before_the_table_is_not_its_header()
    {
        WaveformFileOptions options = new() { Channels = [Mapping("id_low=CH2"), Mapping("vds_low=2")] };

        Waveform waveform = Good("Model,2\nSource,CH2\nCoupling,DC\nTIME,CH1,CH2\n0,1,3\n1e-9,2,4\n", options);

        Assert.Equal([1, 2], waveform[Channel.VdsLow].ToArray());
        Assert.Equal([3, 4], waveform[Channel.IdLow].ToArray());
    }

    [Fact]
    public void An_interval_in_the_lines_before_the_table_is_not_guessed()
    {
        const string Text = "Sample Interval,4e-10\nvds_low\n5\n6\n";

        WaveformProblem problem = Assert.Single(Read(Text).Problems);
        Assert.Equal("f.csv:2:1: first column 'vds_low'; expected the time column t; add it, or state the sample "
            + "interval by --interval.", problem.ToString());
        Assert.Equal(4e-10, Good(Text, new() { Interval = 4e-10 }).SampleInterval);
    }

    [Fact]
    public void A_wrong_first_row_is_said_and_not_taken_for_one_of_the_lines_before()
    {
        Assert.StartsWith("f.csv:2:3: 'x'", Read("t,vds_low\n0,x\n1e-9,2\n2e-9,3\n").Problems[0].ToString(),
            StringComparison.Ordinal);
        Assert.StartsWith("f.csv:2: 1 field", Read("t,vds_low\n0\n1e-9,2\n2e-9,3\n").Problems[0].ToString(),
            StringComparison.Ordinal);
        Assert.StartsWith("f.csv:2:1: 'x'", Read("t,vds_low\nx,0\n1e-9,2\n2e-9,3\n").Problems[0].ToString(),
            StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("t,vds_low\n0,1,5\n1e-9,2,5\n", "f.csv:2: 3 fields; expected 2 as in the header; "
        + "correct the row; where the comma is the decimal sign, part the fields by ; or tab.")]
    [InlineData("t;vds_low\n0;1.234,5\n1;2\n", "f.csv:2:3: '1.234,5'; expected a number in V or A; "
        + "correct it, or write inf or nan for a clipped sample.")]
    [InlineData("t,vds_low\n0,1\n", "f.csv:2: 1 row of data; expected at least two; is the file cut short?")]
    [InlineData("t,vds_low\n0,1 V\n1,2 V\n", "f.csv:2:3: '1 V'; expected a number in V or A; "
        + "correct it, or write inf or nan for a clipped sample.")]
    [InlineData("t,vds_low\n0,0x10\n1,2\n", "f.csv:2:3: '0x10'; expected a number in V or A; "
        + "correct it, or write inf or nan for a clipped sample.")]
    [InlineData("t,vds_low\n\0\0\n1,2\n", "f.csv:2: 1 field; expected 2 as in the header; "
        + "complete or remove the row.")]
    [InlineData("\0t\0,\0", "f.csv:1:1: a NUL byte; expected a text table in UTF-8; "
        + "save it as text in UTF-8, with the usual line ends.")]
    [InlineData("t,vds_low\r0,1\r1,2\r", "f.csv:1:10: a carriage return inside a line; expected a text table in UTF-8; "
        + "save it as text in UTF-8, with the usual line ends.")]
    public void What_is_no_number_or_no_row_is_named_with_its_place(string text, string message) =>
        Assert.Contains(message, Read(text).Problems.Select(problem => problem.ToString()));

    [Fact]
    public void Text_of_two_bytes_a_letter_is_named()
    {
        foreach (Encoding encoding in (Encoding[])[Encoding.Unicode, Encoding.BigEndianUnicode])
        {
            byte[] bytes = [.. encoding.GetPreamble(), .. encoding.GetBytes("t,vds_low\n0,1\n1,2\n")];
            Assert.Equal("f.csv:1:1: UTF-16 text; expected UTF-8; save it as UTF-8 or plain ASCII.",
                Assert.Single(Read(bytes).Problems).ToString());
        }
    }

    [Fact]
    public void Thousands_of_columns_are_read_by_the_ones_that_are_wanted()
    {
        string header = "t," + string.Join(',', Enumerable.Range(2, 4999).Select(i => $"C{i}"));
        string Row(int row) => $"{row}e-9," + string.Join(',', Enumerable.Range(2, 4999).Select(i => $"{row + i}"));
        WaveformFileOptions options = new() { Channels = [Mapping("vbus=C4321"), Mapping("id_low=5000")] };

        Waveform waveform = Good($"{header}\n{Row(0)}\n{Row(1)}\n{Row(2)}\n", options);

        Assert.Equal([4321, 4322, 4323], waveform[Channel.Vbus].ToArray());
        Assert.Equal([5000, 5001, 5002], waveform[Channel.IdLow].ToArray());
    }

    [Fact]
    public void A_lost_a_doubled_and_a_late_sample_are_found_where_they_are()
    {
        // Of three rows a lost one leaves two, which are uniform.
        Gen.Select(Gen.Int[4, 400], Gen.Int[1, 1_000_000], Gen.Int[-1000, 1000], Gen.Int[0, 2]).Sample(
            (count, interval, origin, fault) =>
            {
                int at = 1 + (count / 2);
                long[] times = [.. Enumerable.Range(0, count).Select(i => ((long)origin + i) * interval * 10)];
                for (int i = at; i < count; i++)
                {
                    int late = fault switch { 0 => 10, 1 => -10, _ => i == at ? 5 : 0 };
                    times[i] += late * interval;
                }

                string text = "t,vbus\n" + string.Concat(times.Select(time => $"{time}e-15,1\n"));
                string problem = Assert.Single(Read(text).Problems).ToString();

                Assert.StartsWith($"f.csv:{at + 2}:1: ", problem, StringComparison.Ordinal);
            });
    }

    [Fact]
    public void Times_printed_with_few_digits_are_uniform_for_as_long_as_they_can_be()
    {
        // Six digits at 10 us are steps of 10 ps to 100 ps: the interval of 400 ps is seen as 0.3 to 0.5 ns.
        string text = "t,vbus\n" + string.Concat(Enumerable.Range(0, 5000)
            .Select(i => $"{((i * 4e-10) + 9e-6).ToString("E5", CultureInfo.InvariantCulture)},1\n"));

        Assert.InRange(Good(text).SampleInterval, 3.9999e-10, 4.0001e-10);
    }

    [Fact]
    public void A_gzip_that_ends_early_is_never_taken_for_a_whole_file()
    {
        string text = "t,vbus\n" + string.Concat(Enumerable.Range(0, 3000).Select(i => $"{i},{i * 7919 % 1009}\n"));
        byte[] packed = Pack(text);
        Assert.Empty(Read(packed).Problems);

        for (int cut = 3; cut < packed.Length; cut += cut < packed.Length - 40 ? 37 : 1)
        {
            Assert.True(Read(packed[..cut]).Waveform is null, $"{cut} of {packed.Length} bytes were taken for all");
        }
    }

    [Fact]
    public void A_gzip_of_several_members_is_read_whole() => Assert.Equal(
        [1, 2, 3], Good([.. Pack("t,vbus\n0,1\n1,"), .. Pack("2\n2,3\n")])[Channel.Vbus].ToArray());

    [Fact]
    public void A_directory_and_a_channel_mapped_twice_are_refused()
    {
        WaveformProblem problem = Assert.Single(WaveformFile.Read(Path.GetTempPath()).Problems);
        Assert.Equal((Path.GetTempPath(), "a directory"), (problem.File, problem.Found));
        WaveformFileOptions twice = new() { Channels = [Mapping("id_low=2"), Mapping("id_low=other.csv:2")] };
        Assert.Equal("2 columns for one channel", Assert.Single(Read("t,id_low\n0,1\n1,2\n", twice).Problems).Found);
    }

    private static ChannelMapping Mapping(string text) => ChannelMapping.Parse(text).Mapping!;

    private static Waveform Good(string text, WaveformFileOptions? options = null) =>
        Good(Encoding.UTF8.GetBytes(text), options);

    private static Waveform Good(byte[] bytes, WaveformFileOptions? options = null)
    {
        WaveformRead read = Read(bytes, options);
        Assert.Empty(read.Problems.Select(problem => problem.ToString()));
        return read.Waveform!;
    }

    private static WaveformRead Read(string text, WaveformFileOptions? options = null) =>
        Read(Encoding.UTF8.GetBytes(text), options);

    private static WaveformRead Read(byte[] bytes, WaveformFileOptions? options = null) =>
        WaveformFile.Read(new MemoryStream(bytes), "f.csv", options);

    private static byte[] Pack(string text)
    {
        using MemoryStream packed = new();
        using (GZipStream gzip = new(packed, CompressionMode.Compress))
        {
            gzip.Write(Encoding.UTF8.GetBytes(text));
        }

        return packed.ToArray();
    }
}
