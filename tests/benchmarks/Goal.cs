using System.Text.Json;

namespace BenchRunner.Benchmarks;

/// <summary>What a row is held against.</summary>
/// <param name="Work">Name of the work, e.g. <c>signals/capture-10k</c>.</param>
/// <param name="Of">What the goal is of: <c>peer</c>, <c>floor</c> or <c>ours</c>.</param>
/// <param name="Better">Whether <c>lower</c>, <c>higher</c> or <c>between</c> is better.</param>
/// <param name="Bounds">The goal; two numbers for <c>between</c>.</param>
/// <param name="What">What is measured.</param>
/// <param name="IsOwn">Whether it is a row of our own, beside those of the table.</param>
internal sealed record Goal(
    string Work, string Of, string Better, IReadOnlyList<double> Bounds, string What, bool IsOwn)
{
    /// <summary>Group of the work.</summary>
    public string Group => Work[..Work.IndexOf('/', StringComparison.Ordinal)];

    /// <summary>Whether a figure meets the goal.</summary>
    /// <param name="figure">Ours over peer or floor, or ours itself.</param>
    public bool IsMetBy(double figure) => Better switch
    {
        "lower" => figure <= Bounds[0],
        "higher" => figure >= Bounds[0],
        _ => figure >= Bounds[0] && figure <= Bounds[1],
    };

    /// <summary>The goals of a file: of each work <c>of</c>, <c>better</c>, <c>goal</c>, <c>what</c>.</summary>
    /// <param name="file">Name of the file beside the program.</param>
    /// <param name="isOwn">Whether its rows are of our own.</param>
    public static IEnumerable<Goal> Read(string file, bool isOwn)
    {
        string path = Path.Combine(AppContext.BaseDirectory, file);
        using JsonDocument document = JsonDocument.Parse(File.ReadAllText(path));
        foreach (JsonProperty work in document.RootElement.EnumerateObject())
        {
            JsonElement goal = work.Value.GetProperty("goal");
            yield return new Goal(
                work.Name,
                work.Value.GetProperty("of").GetString()!,
                work.Value.GetProperty("better").GetString()!,
                goal.ValueKind == JsonValueKind.Array
                    ? [.. goal.EnumerateArray().Select(bound => bound.GetDouble())]
                    : [goal.GetDouble()],
                work.Value.GetProperty("what").GetString()!,
                isOwn);
        }
    }
}
