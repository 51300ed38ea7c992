using System.IO.Compression;
using BenchRunner.Signals.Files;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Files;

/// <summary>Long records are read in the memory that their samples take.</summary>
/// <remarks>What is counted is all memory that the reading thread ever asked for, a bound of what it held at any time: the
/// same on every machine.</remarks>
public sealed class LargeFileTests
{
    private const long Fixed = 4 << 20;

    [Fact]
    [Trait("kind", "slow")]
    public void Ten_million_rows_of_five_channels_take_eight_bytes_a_sample()
    {
        const int Rows = 10_000_000;

        long asked = Read(new RowsStream(Rows, canSeek: true), Rows);

        Assert.InRange(asked, 8L * Rows * 5, (8L * Rows * 5) + Fixed);
    }

    [Fact]
    public void A_packed_file_is_counted_before_it_is_read()
    {
        const int Rows = 300_000;
        using MemoryStream packed = new();
        using (GZipStream gzip = new(packed, CompressionLevel.Fastest, leaveOpen: true))
        {
            new RowsStream(Rows, canSeek: true).CopyTo(gzip);
        }

        Assert.True(packed.Length > 1 << 20, "the file is too small to be counted");
        packed.Position = 0;
        Assert.InRange(Read(packed, Rows), 8L * Rows * 5, (8L * Rows * 5) + Fixed);
    }

    [Fact]
    public void A_stream_that_cannot_be_read_twice_is_read_in_growing_arrays()
    {
        const int Rows = 300_000;

        // Arrays that double, and one copy to the right length: at most five times the samples are ever asked for.
        Assert.InRange(Read(new RowsStream(Rows, canSeek: false), Rows), 8L * Rows * 5, (40L * Rows * 5) + Fixed);
    }

    private static long Read(Stream stream, int rows)
    {
        long before = GC.GetAllocatedBytesForCurrentThread();
        WaveformRead read = WaveformFile.Read(stream, "long.csv");
        long asked = GC.GetAllocatedBytesForCurrentThread() - before;

        Assert.Empty(read.Problems.Select(problem => problem.ToString()));
        Waveform waveform = read.Waveform!;
        Assert.Equal((rows, 1e-9), (waveform.Count, waveform.SampleInterval));
        Channel[] channels = [Channel.VgsLow, Channel.VdsLow, Channel.IdLow, Channel.VdsHigh, Channel.Vbus];
        for (int column = 0; column < channels.Length; column++)
        {
            for (int row = 0; row < rows; row += 9973)
            {
                Assert.Equal(RowsStream.Value(row, column), waveform[channels[column]][row]);
            }

            Assert.Equal(RowsStream.Value(rows - 1, column), waveform[channels[column]][^1]);
        }

        return asked;
    }
}
