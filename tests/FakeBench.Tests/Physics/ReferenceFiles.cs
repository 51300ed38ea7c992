using System.Globalization;
using System.IO.Compression;
using System.Text.Json;

namespace FakeBench.Tests.Physics;

/// <summary>Waveforms and values of tests/reference/waveforms: a general-purpose circuit simulator's, not
/// ours.</summary>
internal static class ReferenceFiles
{
    public static string Folder
    {
        get
        {
            var folder = new DirectoryInfo(AppContext.BaseDirectory);
            while (folder is not null && !File.Exists(Path.Combine(folder.FullName, "BenchRunner.sln")))
            {
                folder = folder.Parent;
            }

            return Path.Combine(folder?.FullName ?? ".", "tests", "reference", "waveforms");
        }
    }

    /// <summary>The value of a quantity by one of its definitions, from the simulator's own points.</summary>
    public static double Truth(string scenario, string quantity, string definition)
    {
        using var document = JsonDocument.Parse(File.ReadAllText(Path.Combine(Folder, scenario + "-reference.json")));
        return document.RootElement.GetProperty("truth").GetProperty(quantity).GetProperty(definition).GetDouble();
    }

    /// <summary>The simulator's waveforms on their own grid, time counted from the driver's on1.</summary>
    /// <param name="scenario">Name of the deck.</param>
    /// <param name="on1">The deck's time of on1, s.</param>
    public static Waveforms Clean(string scenario, double on1)
    {
        using var file = File.OpenRead(Path.Combine(Folder, scenario + "-clean.csv.gz"));
        using var reader = new StreamReader(new GZipStream(file, CompressionMode.Decompress));
        string[] header = reader.ReadLine()!.Split(',');
        Assert.Equal("t,vgs_low,vds_low,id_low,vgs_high,vds_high,id_high,vbus,i_load", string.Join(',', header));
        var columns = header.Select(_ => new List<double>()).ToArray();
        while (reader.ReadLine() is { } line)
        {
            string[] fields = line.Split(',');
            for (int i = 0; i < fields.Length; i++)
            {
                columns[i].Add(double.Parse(fields[i], CultureInfo.InvariantCulture));
            }
        }

        double interval = (columns[0][^1] - columns[0][0]) / (columns[0].Count - 1);
        return new Waveforms(columns[0][0] - on1, interval, [.. columns.Skip(1).Select(c => c.ToArray())]);
    }
}
