using System.Text.Json;

namespace FakeBench.Tests.Scpi;

/// <summary>The check cases of tests/reference/scpi; their README names their sources.</summary>
internal static class ScpiReference
{
    public static IEnumerable<JsonElement> Cases(string file, string group)
    {
        string? folder = AppContext.BaseDirectory;
        while (folder is not null && !Directory.Exists(Path.Combine(folder, "tests", "reference", "scpi")))
        {
            folder = Path.GetDirectoryName(folder);
        }

        string path = Path.Combine(folder ?? "", "tests", "reference", "scpi", file);
        using JsonDocument document = JsonDocument.Parse(File.ReadAllText(path));
        return [.. document.RootElement.GetProperty(group).EnumerateArray().Select(e => e.Clone())];
    }

    public static string Text(this JsonElement element, string name) => element.GetProperty(name).GetString() ?? "";
}
