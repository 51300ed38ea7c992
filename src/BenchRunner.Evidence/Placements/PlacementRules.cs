using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Placements;

/// <summary>Which placements are taken.</summary>
internal static class PlacementRules
{
    public static string? Refusal(SqlSession session, Placement placement)
    {
        if (Array.Exists(
            (string[])[placement.Place, placement.By],
            text => string.IsNullOrWhiteSpace(text) || text.Length > Placement.LongestText))
        {
            return "A placement says where and by whom, briefly.";
        }

        return session.Number("select count(*) from run where uid = ?1", placement.Run) == 0
            ? $"Run {placement.Run} is not in the file."
            : null;
    }
}
