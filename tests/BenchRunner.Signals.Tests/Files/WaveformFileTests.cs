using System.IO.Compression;
using System.Text;
using BenchRunner.Signals.Files;
using BenchRunner.Signals.Traces;
using CsCheck;

namespace BenchRunner.Signals.Tests.Files;

public sealed class WaveformFileTests
{
    [Fact]
    public void The_house_form_is_read_as_it_stands()
    {
        Waveform waveform = Good("t,vds_low,id_low\n-1e-9,20,0.5\n0,19.5,-2.5E0\n1e-9,.5,+3\n");

        Assert.Equal(-1e-9, waveform.TimeOrigin);
        Assert.Equal(1e-9, waveform.SampleInterval);
        Assert.Equal([20, 19.5, 0.5], waveform[Channel.VdsLow].ToArray());
        Assert.Equal([0.5, -2.5, 3], waveform[Channel.IdLow].ToArray());
        Assert.False(waveform.Has(Channel.Vbus));
    }

    [Fact]
    public void Line_ends_byte_order_mark_quotes_and_blanks_make_no_difference()
    {
        Waveform waveform = Good("\uFEFF\"t\", \"vds_low\"\r\n0, 1\r\n1e-9 ,2\r\n\r\n");

        Assert.Equal([1, 2], waveform[Channel.VdsLow].ToArray());
    }

    [Fact]
    public void Infinity_and_NaN_are_clipped_samples()
    {
        Waveform waveform = Good("t,vds_low\n0,inf\n1,-Inf\n2,nan\n3,Infinity\n4,-infinity\n5,NaN\n");

        Assert.Equal(
            [
                double.PositiveInfinity, double.NegativeInfinity, double.NaN, double.PositiveInfinity,
                double.NegativeInfinity, double.NaN,
            ],
            waveform[Channel.VdsLow].ToArray());
    }

    [Theory]
    [InlineData("t;vds_low;id_low\n0;1,5;-2,25e1\n1e-9;1,5;0\n")]
    [InlineData("t\tvds_low\tid_low\n0\t1.5\t-22.5\n1e-9\t1.5\t0\n")]
    [InlineData("Model: made up\nRecord Length,2\n\nt,vds_low,id_low\n(s),(V),(A)\n0,1.5,-22.5\n1e-9,1.5,0\n")]
    public void Separators_decimal_commas_and_lines_before_the_header_are_understood(string text)
    {
        Waveform waveform = Good(text);

        Assert.Equal([1.5, 1.5], waveform[Channel.VdsLow].ToArray());
        Assert.Equal([-22.5, 0], waveform[Channel.IdLow].ToArray());
    }

    [Fact]
    public void Foreign_columns_are_taken_by_name_and_by_number()
    {
        WaveformFileOptions options = new()
        {
            Channels = [Mapping("vds_low=CH1"), Mapping("id_low=4")],
        };

        Waveform waveform = Good("TIME,CH1,CH2,CH3\n0,1,x,3\n2e-9,4,y,6\n", options);

        Assert.Equal(2e-9, waveform.SampleInterval);
        Assert.Equal([1, 4], waveform[Channel.VdsLow].ToArray());
        Assert.Equal([3, 6], waveform[Channel.IdLow].ToArray());
    }

    [Fact]
    public void A_table_of_bare_numbers_is_read_by_column_numbers()
    {
        WaveformFileOptions options = new() { Interval = 1e-9, Channels = [Mapping("vds_low=1"), Mapping("id_low=2")] };

        Waveform waveform = Good("1,2\n3,4\n5,6\n", options);

        Assert.Equal([1, 3, 5], waveform[Channel.VdsLow].ToArray());
        Assert.Equal((0, 1e-9), (waveform.TimeOrigin, waveform.SampleInterval));
    }

    [Fact]
    public void A_stated_interval_stands_in_for_the_time_column_and_overrides_one()
    {
        WaveformFileOptions options = new() { Interval = 4e-10 };

        Assert.Equal(4e-10, Good("vds_low\n1\n2\n", options).SampleInterval);
        Assert.Equal(7, Good("t,vds_low\n7,1\n7,2\n", options).TimeOrigin);
    }

    [Fact]
    public void Gzip_is_told_by_its_bytes()
    {
        WaveformRead read = WaveformFile.Read(new MemoryStream(Pack("t,vbus\n0,1\n1,2\n")), "a.csv.gz");

        Assert.Equal([1, 2], read.Waveform![Channel.Vbus].ToArray());
    }

    [Fact]
    public void A_damaged_gzip_is_a_problem()
    {
        string rows = string.Concat(Enumerable.Range(0, 5000).Select(i => $"{i},{i * 7919 % 1009}\n"));
        byte[] packed = Pack("t,vbus\n" + rows);
        packed[packed.Length / 2] ^= 0x55;

        Assert.NotEmpty(WaveformFile.Read(new MemoryStream(packed), "a.csv.gz").Problems);
        Assert.NotEmpty(WaveformFile.Read(new MemoryStream(packed[..(packed.Length / 3)]), "a.csv.gz").Problems);
    }

    [Theory]
    [InlineData("t,vds_low\n0,1\n1e-9,abc\n2e-9,3\n",
        "f.csv:3:6: 'abc'; expected a number in V or A; correct it, or write inf or nan "
            + "for a clipped sample.")]
    [InlineData("t,vds_low\n0,1\nnan,2\n2e-9,3\n",
        "f.csv:3:1: 'nan'; expected a time in s; correct it, or state the "
            + "interval by --interval and leave the times out.")]
    [InlineData("t,vds_low\n0,1\n1e-9,\n2e-9,3\n",
        "f.csv:3:6: an empty field; expected a number in V or A; correct it, or write inf or nan "
            + "for a clipped sample.")]
    [InlineData("t,vds_low\n0,1\n1e-9\n2e-9,3\n",
        "f.csv:3: 1 field; expected 2 as in the header; complete or remove the row.")]
    [InlineData("t,vds_low\n0,1\n1e-9,2\n3e-9,3\n4e-9,4\n",
        "f.csv:4:1: an interval of 2E-09 s where the first is 1E-09 s; expected times that rise by equal intervals; "
        + "resample the record, or state the interval by --interval if the times are wrong.")]
    [InlineData("t,vds_low\n2,1\n1,2\n0,3\n",
        "f.csv:3:1: time goes from 2 s to 1 s; expected times that rise by equal intervals; "
        + "resample the record, or state the interval by --interval if the times are wrong.")]
    [InlineData("t,vds_low\n0,1\n\n1,2\n",
        "f.csv:4: a row behind an empty line; expected rows one after the other; remove the empty line.")]
    [InlineData("t,vds_low,vds_low\n0,1,2\n1,2,3\n",
        "f.csv:1:11: vds_low a second time; expected each channel once; rename or remove one.")]
    [InlineData("vds_low\n1\n2\n",
        "f.csv:1:1: first column 'vds_low'; expected the time column t; "
        + "add it, or state the sample interval by --interval.")]
    [InlineData("t,vds_low\n", "f.csv:1: 0 rows of data; expected at least two; is the file cut short?")]
    public void A_mistake_is_named_with_place_and_advice(string text, string message)
    {
        WaveformRead read = Read(text);

        Assert.Null(read.Waveform);
        Assert.Equal(message, Assert.Single(read.Problems).ToString());
    }

    [Theory]
    [InlineData("", "the file is empty")]
    [InlineData("hello\nworld\n", "'hello'")]
    [InlineData("t,vds,temperature,vbus\n0,1,2,3\n1,1,2,3\n", "column 'vds'")]
    public void What_is_no_waveform_is_said_with_the_channels_that_there_are(string text, string found)
    {
        WaveformProblem problem = Read(text).Problems[0];

        Assert.Equal(found, problem.Found);
        Assert.Contains("vgs_low, vds_low, id_low", problem.Expected, StringComparison.Ordinal);
    }

    [Fact]
    public void All_mistakes_come_at_once_up_to_a_bound()
    {
        string rows = string.Concat(Enumerable.Range(0, 100).Select(i => $"{i},x\n"));

        Assert.Equal(3, Read("t,vds_low\n0,a\n1,2\n2,b\n3,4,5\n").Problems.Count);
        Assert.Equal(WaveformRead.MostProblems, Read("t,vds_low\n" + rows).Problems.Count);
    }

    [Fact]
    public void Rows_and_bytes_are_bounded()
    {
        const string Text = "t,vds_low\n0,1\n1,2\n2,3\n3,4\n";

        WaveformProblem rows = Read(Text, new() { MostRows = 3 }).Problems[0];
        Assert.Equal("more than 3 rows", rows.Found);
        Assert.NotNull(Read(Text, new() { MostRows = 4 }).Waveform);
        Assert.Contains("bytes", Read(Text, new() { MostBytes = 10 }).Problems[0].Found, StringComparison.Ordinal);
        Assert.Contains("64 kB", Read(new string('x', 400_000)).Problems[0].Found, StringComparison.Ordinal);
    }

    [Fact]
    public void A_missing_file_is_a_problem_and_no_exception()
    {
        WaveformProblem problem = Assert.Single(WaveformFile.Read("/nowhere/at-all.csv").Problems);

        Assert.Equal(("/nowhere/at-all.csv", "check the path"), (problem.File, problem.Advice));
    }

    [Fact]
    public void Channels_of_several_files_are_joined_on_one_time_base()
    {
        using TemporaryFolder folder = new();
        string main = folder.Write("main.csv", "t,vds_low,id_low\n0,1,9\n1e-9,2,9\n");
        string current = folder.Write("current.csv", "s,value\n0,5\n1e-9,6\n");
        string late = folder.Write("late.csv", "s,value\n5e-10,5\n1.5e-9,6\n");

        WaveformRead joined = WaveformFile.Read(main, new() { Channels = [Mapping($"id_low={current}:value")] });
        WaveformRead refused = WaveformFile.Read(main, new() { Channels = [Mapping($"id_low={late}:2")] });

        Assert.Equal([5, 6], joined.Waveform![Channel.IdLow].ToArray());
        Assert.Equal([1, 2], joined.Waveform[Channel.VdsLow].ToArray());
        Assert.Equal(late, Assert.Single(refused.Problems).File);
    }

    [Theory]
    [InlineData("id_low")]
    [InlineData("id_low=")]
    [InlineData("id_low=:3")]
    [InlineData("id_low=file.csv:")]
    [InlineData("current=CH3")]
    public void A_mapping_that_says_nothing_is_refused(string text)
    {
        (ChannelMapping? mapping, WaveformProblem? problem) = ChannelMapping.Parse(text);

        Assert.Null(mapping);
        Assert.StartsWith($"--channel {text}: ", problem!.ToString(), StringComparison.Ordinal);
    }

    [Fact]
    public void A_mapping_keeps_the_colon_of_a_drive() =>
        Assert.Equal(
            new ChannelMapping(Channel.IdLow, @"C:\lab\i.csv", "2"),
            ChannelMapping.Parse(@"id_low=C:\lab\i.csv:2").Mapping);

    [Fact]
    public void Every_sample_comes_back_to_the_last_bit() =>
        Gen.Select(Gen.Double.Array[2, 60], Gen.Int[-1_000_000, 1_000_000], Gen.Int[1, 100_000])
            .Sample((samples, origin, interval) =>
            {
                Waveform waveform = new(
                    origin * 1e-9,
                    interval * 1e-12,
                    new Dictionary<Channel, double[]> { [Channel.ILoad] = samples, [Channel.Vbus] = samples });
                using StringWriter writer = new();
                WaveformFile.Write(waveform, writer);

                Waveform again = Good(writer.ToString());

                Assert.Equal(samples.Select(Bits), again[Channel.ILoad].ToArray().Select(Bits));
                Assert.Equal(waveform.TimeOrigin, again.TimeOrigin);
                Assert.InRange(again.SampleInterval / waveform.SampleInterval, 1 - 1e-6, 1 + 1e-6);
            });

    [Fact]
    public void The_interval_is_the_one_that_was_meant() =>
        Assert.Equal(4e-10, Good("t,vbus\n8.8e-6,1\n8.8004e-6,1\n8.8008e-6,1\n8.8012e-6,1\n").SampleInterval);

    [Fact]
    public void Numbers_are_rounded_as_the_platform_rounds_them() =>
        Gen.Select(Gen.Double, Gen.Int[0, 4]).Sample((value, format) =>
        {
            string[] formats = ["R", "E3", "E16", "F4", "G17"];
            string text = value.ToString(formats[format], System.Globalization.CultureInfo.InvariantCulture);
            double expected = double.Parse(text, System.Globalization.CultureInfo.InvariantCulture);

            Assert.Equal(Bits(expected), Bits(Good($"t,vbus\n0,{text}\n1,0\n")[Channel.Vbus][0]));
        });

    [Fact]
    public void No_bytes_whatever_throw() =>
        Gen.OneOf(
            Gen.Byte.Array[0, 400],
            Gen.Char["t,;\t\n\r\"0123456789.eE+-vbusinfa"].Array[0, 300].Select(text => Encoding.UTF8.GetBytes(text)),
            Gen.Char["0123456789.,-e\n"].Array[0, 200]
                .Select(text => Encoding.UTF8.GetBytes("t,vbus\n" + new string(text))),
            Gen.Byte.Array[0, 300].Select(bytes => (byte[])[0x1F, 0x8B, .. bytes]))
        .Sample(bytes =>
        {
            WaveformFileOptions mapped = new() { Channels = [Mapping("id_low=1")] };
            foreach (WaveformFileOptions options in (WaveformFileOptions[])[new(), new() { Interval = 1e-9 }, mapped])
            {
                WaveformRead read = WaveformFile.Read(new MemoryStream(bytes), "f.csv", options);
                Assert.Equal(read.Waveform is null, read.Problems.Count > 0);
                Assert.All(read.Problems, problem => Assert.DoesNotContain('\n', problem.ToString()));
            }
        });

    private static long Bits(double value) =>
        BitConverter.DoubleToInt64Bits(double.IsNaN(value) ? double.NaN : value);

    private static ChannelMapping Mapping(string text) => ChannelMapping.Parse(text).Mapping!;

    private static Waveform Good(string text, WaveformFileOptions? options = null)
    {
        WaveformRead read = Read(text, options);
        Assert.Empty(read.Problems);
        return read.Waveform!;
    }

    private static WaveformRead Read(string text, WaveformFileOptions? options = null) =>
        WaveformFile.Read(new MemoryStream(Encoding.UTF8.GetBytes(text)), "f.csv", options);

    private static byte[] Pack(string text)
    {
        using MemoryStream packed = new();
        using (GZipStream gzip = new(packed, CompressionMode.Compress))
        {
            gzip.Write(Encoding.UTF8.GetBytes(text));
        }

        return packed.ToArray();
    }

    private sealed class TemporaryFolder : IDisposable
    {
        private readonly DirectoryInfo _folder = Directory.CreateTempSubdirectory("benchrunner-waveforms-");

        public string Write(string name, string text)
        {
            string path = Path.Combine(_folder.FullName, name);
            File.WriteAllText(path, text);
            return path;
        }

        public void Dispose() => _folder.Delete(recursive: true);
    }
}
