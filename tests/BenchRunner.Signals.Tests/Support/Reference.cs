using System.Globalization;
using System.IO.Compression;
using System.Text.Json;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Support;

/// <summary>Check data of tests/reference: where it lies, and how it is read.</summary>
internal static class Reference
{
    public static string Folder { get; } = Find();

    public static JsonDocument Json(string name) => JsonDocument.Parse(File.ReadAllBytes(Path.Combine(Folder, name)));

    /// <summary>A gzipped CSV file of the waveforms folder.</summary>
    public static Waveform Waveform(string name)
    {
        using FileStream file = File.OpenRead(Path.Combine(Folder, "waveforms", name));
        using StreamReader reader = new(new GZipStream(file, CompressionMode.Decompress));
        string[] header = reader.ReadLine()!.Split(',');
        List<double>[] columns = [.. header.Select(_ => new List<double>())];
        while (reader.ReadLine() is { } line)
        {
            string[] cells = line.Split(',');
            for (int i = 0; i < cells.Length; i++)
            {
                columns[i].Add(double.Parse(cells[i], CultureInfo.InvariantCulture));
            }
        }

        double interval = (columns[0][^1] - columns[0][0]) / (columns[0].Count - 1);
        Dictionary<Channel, double[]> channels = [];
        for (int i = 1; i < header.Length; i++)
        {
            channels[ChannelNames.Parse(header[i])!.Value] = [.. columns[i]];
        }

        return new Waveform(columns[0][0], interval, channels);
    }

    /// <summary>The facts that a scenario states, and with a recording chain its errors.</summary>
    public static AnalysisSettings Settings(string scenario, bool measured)
    {
        using JsonDocument reference = Json($"waveforms/{scenario}-reference.json");
        JsonElement stated = reference.RootElement.GetProperty("stated");
        Dictionary<Channel, ChannelCorrection> corrections = [];
        if (measured)
        {
            using JsonDocument chain = Json($"waveforms/{scenario}-measured.json");
            foreach (JsonProperty channel in chain.RootElement.GetProperty("channels").EnumerateObject())
            {
                corrections[ChannelNames.Parse(channel.Name)!.Value] = new ChannelCorrection(
                    channel.Value.GetProperty("gain").GetDouble(),
                    channel.Value.GetProperty("offset").GetDouble(),
                    channel.Value.GetProperty("skew_s").GetDouble());
            }
        }

        return new AnalysisSettings
        {
            EveryDefinition = true,
            Corrections = corrections,
            Shunt = new Shunt(stated.GetProperty("shunt_ohm").GetDouble(), 0),
            ForwardVoltage = stated.TryGetProperty("forward_voltage_V", out JsonElement forward)
                && forward.ValueKind == JsonValueKind.Number ? forward.GetDouble() : null,
            IntegrationTime = 100e-9,
        };
    }

    private static string Find()
    {
        for (DirectoryInfo? folder = new(AppContext.BaseDirectory); folder is not null; folder = folder.Parent)
        {
            if (File.Exists(Path.Combine(folder.FullName, "BenchRunner.sln")))
            {
                return Path.Combine(folder.FullName, "tests", "reference");
            }
        }

        throw new DirectoryNotFoundException("BenchRunner.sln is not above the test's folder.");
    }
}
