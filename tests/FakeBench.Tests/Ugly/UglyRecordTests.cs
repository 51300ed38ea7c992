using System.Globalization;
using System.IO.Compression;
using System.Text;
using FakeBench.Tests.Physics;

namespace FakeBench.Tests.Ugly;

/// <summary>The records in tests/reference/ugly are what the generator makes.</summary>
/// <remarks>To make them anew: set UGLY_RECORDS to that folder and run these tests.</remarks>
public sealed class UglyRecordTests
{
    private static readonly string? _anew = Environment.GetEnvironmentVariable("UGLY_RECORDS");

    private static readonly string _folder = Path.Combine(ReferenceFiles.Folder, "..", "ugly");

    public static TheoryData<string> Names => [.. UglyCases.All.Select(ugly => ugly.Name)];

    [Theory]
    [MemberData(nameof(Names))]
    public void A_stored_record_is_what_the_generator_makes(string name)
    {
        UglyCase ugly = UglyCases.All.Single(one => one.Name == name);
        double[][] samples = UglyRecord.Samples(ugly);
        if (_anew is not null)
        {
            Write(Path.Combine(_anew, name + ".csv.gz"), UglyRecord.Csv(ugly, samples));
            File.WriteAllText(Path.Combine(_anew, name + ".json"), UglyRecord.Json(ugly));
        }

        Same(File.ReadAllText(Path.Combine(_folder, name + ".json")), UglyRecord.Json(ugly));
        string[] rows = Read(Path.Combine(_folder, name + ".csv.gz"));
        Assert.Equal(ugly.Points, rows.Length);
        int other = 0;
        for (int i = 0; i < rows.Length; i++)
        {
            string[] fields = rows[i].Split(',');
            for (int channel = 0; channel < samples.Length; channel++)
            {
                if (double.IsInfinity(samples[channel][i]))
                {
                    Assert.Equal(samples[channel][i] > 0 ? "inf" : "-inf", fields[channel + 1]);
                    continue;
                }

                double stored = double.Parse(fields[channel + 1], CultureInfo.InvariantCulture);
                double off = Math.Abs(stored - samples[channel][i]) / ugly.Channels[channel].Digitiser.Step;
                // Another machine's last bit may round one code otherwise.
                Assert.InRange(off, 0, 1.01);
                other += off > 0.01 ? 1 : 0;
            }
        }

        Assert.InRange(other, 0, rows.Length / 1000);
    }

    [Fact]
    public void The_set_is_small() => Assert.InRange(
        new DirectoryInfo(_folder).EnumerateFiles().Sum(file => file.Length), 1, 1_500_000);

    /// <summary>Equal texts, but for the last digits of numbers that another machine's last bit may change.</summary>
    private static void Same(string stored, string made)
    {
        char[] marks = [' ', ',', '\n'];
        string[] before = stored.Split(marks), now = made.Split(marks);
        Assert.Equal(before.Length, now.Length);
        for (int i = 0; i < before.Length; i++)
        {
            if (double.TryParse(before[i], CultureInfo.InvariantCulture, out double number))
            {
                Approximately.Equal(number, double.Parse(now[i], CultureInfo.InvariantCulture), 1e-5);
            }
            else
            {
                Assert.Equal(before[i], now[i]);
            }
        }
    }

    private static void Write(string path, string text)
    {
        using GZipStream file = new(File.Create(path), CompressionLevel.SmallestSize);
        file.Write(Encoding.ASCII.GetBytes(text));
    }

    private static string[] Read(string path)
    {
        using StreamReader file = new(new GZipStream(File.OpenRead(path), CompressionMode.Decompress));
        return [.. file.ReadToEnd().Split('\n', StringSplitOptions.RemoveEmptyEntries).Skip(1)];
    }
}
