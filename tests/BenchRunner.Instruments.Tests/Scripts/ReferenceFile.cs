using System.Globalization;
using System.Text;
using System.Text.Json;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>Reads the check cases of tests/reference/scpi.</summary>
internal static class ReferenceFile
{
    public static JsonElement[] Cases(string file, string list)
    {
        var folder = new DirectoryInfo(AppContext.BaseDirectory);
        while (!Directory.Exists(Path.Combine(folder.FullName, "tests", "reference", "scpi")))
        {
            folder = folder.Parent ?? throw new DirectoryNotFoundException(
                "tests/reference/scpi is not above the test's folder");
        }

        var path = Path.Combine(folder.FullName, "tests", "reference", "scpi", file);
        return [.. JsonDocument.Parse(File.ReadAllBytes(path)).RootElement.GetProperty(list).EnumerateArray()];
    }

    public static JsonElement Case(string file, string list, string id) =>
        Cases(file, list).Single(c => c.GetProperty("id").GetString() == id);

    /// <summary>The bytes of <c>input</c>, <c>input_hex</c> or the joined <c>segments</c>.</summary>
    public static byte[] Input(JsonElement one) =>
        one.TryGetProperty("input_hex", out var hex) ? Hex(hex.GetString()!)
        : one.TryGetProperty("segments", out var segments)
            ? Encoding.UTF8.GetBytes(string.Concat(segments.EnumerateArray().Select(s => s.GetString())))
        : Encoding.UTF8.GetBytes(one.GetProperty("input").GetString()!);

    public static byte[] Hex(string text) =>
        [.. text.Split(' ', StringSplitOptions.RemoveEmptyEntries)
            .Select(b => byte.Parse(b, NumberStyles.HexNumber, CultureInfo.InvariantCulture))];
}
