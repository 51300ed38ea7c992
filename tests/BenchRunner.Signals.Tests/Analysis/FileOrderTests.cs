using System.Globalization;
using System.Text;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Files;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;
using CsCheck;

namespace BenchRunner.Signals.Tests.Analysis;

public sealed class FileOrderTests
{
    [Fact]
    public void Another_order_of_the_channels_in_the_file_changes_nothing()
    {
        Waveform record = Reference.Waveform("hv650soft-measured.csv.gz");
        AnalysisSettings settings = Reference.Settings("hv650soft", measured: true);
        Channel[] channels = [.. record.Channels];
        AnalysisResult expected = WaveformAnalysis.Analyse(ThroughAFile(record, channels), settings);
        Assert.Contains(expected.Quantities, q => q.Value is not null);
        Gen.Shuffle(channels).Sample(
            order =>
            {
                AnalysisResult result = WaveformAnalysis.Analyse(ThroughAFile(record, order), settings);
                Assert.Equal(expected.Quantities, result.Quantities);
                Assert.Equal(expected.Train.Edges, result.Train.Edges);
            },
            iter: 10);
    }

    private static Waveform ThroughAFile(Waveform record, Channel[] order)
    {
        StringBuilder text = new();
        text.Append("t,").AppendJoin(',', order.Select(ChannelNames.Name)).Append('\n');
        for (int i = 0; i < record.Count; i++)
        {
            text.Append(CultureInfo.InvariantCulture, $"{record.TimeAt(i):R}");
            foreach (Channel channel in order)
            {
                text.Append(CultureInfo.InvariantCulture, $",{record[channel][i]:R}");
            }

            text.Append('\n');
        }

        WaveformRead read = WaveformFile.Read(new MemoryStream(Encoding.UTF8.GetBytes(text.ToString())), "record.csv");
        Assert.Empty(read.Problems);
        return read.Waveform!;
    }
}
