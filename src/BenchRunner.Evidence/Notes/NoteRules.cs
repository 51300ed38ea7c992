using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Notes;

/// <summary>Which notes are taken.</summary>
internal static class NoteRules
{
    public static string? Refusal(SqlSession session, Note note)
    {
        if (Wrong("who says so", note.By) is { } nobody)
        {
            return nobody;
        }

        if (Wrong("the reason", note.Because) is { } nothing)
        {
            return nothing;
        }

        const string sql = """
            select exists (select 1 from run where lot = (select id from word where text = ?1) and device = ?2)
            """;
        return session.Number(sql, note.Lot, note.Device) == 0
            ? $"{note.Device} has no run in lot {note.Lot}; check serial, lot and evidence file."
            : null;
    }

    private static string? Wrong(string what, string text) => text switch
    {
        _ when string.IsNullOrWhiteSpace(text) => $"{what} is empty; a note says who and why.",
        { Length: > Note.LongestText } =>
            $"{what} has {text.Length} characters, at most {Note.LongestText} are taken; shorten it.",
        _ => null,
    };
}
