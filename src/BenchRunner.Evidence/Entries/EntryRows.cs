using BenchRunner.Evidence.Notes;
using BenchRunner.Evidence.Placements;
using BenchRunner.Evidence.Seals;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Entries;

/// <summary>The rows of an entry, written and sealed inside the caller's transaction.</summary>
internal static class EntryRows
{
    public const string NoteKind = "note";
    public const string PlacementKind = "placement";

    /// <summary>Adds an entry with its content and seals it.</summary>
    /// <param name="to">The session.</param>
    /// <param name="kind">What kind of entry, e.g. <c>note</c>: it says which tables hold its content.</param>
    /// <param name="author">Who or what adds it.</param>
    /// <param name="uid">Its identity.</param>
    /// <param name="at">When, UTC ISO 8601.</param>
    /// <param name="content">Writes the content of the entry whose row it is given.</param>
    public static SealedEntry Add(
        SqlSession to, string kind, string author, string uid, string at, Action<SqlSession, long> content)
    {
        long origin = to.Number("select min(id) from origin");
        long entry = to.Insert(
            "insert into entry (uid, origin, ordinal, kind, at, author) values (?1, ?2, ?3, ?4, ?5, ?6)",
            uid, origin, SealChain.NextOrdinal(to, origin), kind, at, author);
        content(to, entry);
        return new SealedEntry(uid, at, SealChain.AppendEntry(to, entry, at));
    }

    public static void Note(SqlSession to, long entry, Note note) =>
        to.Execute(
            "insert into note (entry, device, lot, kind, because) values (?1, ?2, ?3, ?4, ?5)",
            entry, note.Device, to.Word(note.Lot), NoteWords.Of(note.Kind), note.Because);

    public static void Placement(SqlSession to, long entry, Placement placement) =>
        to.Execute(
            "insert into placement (entry, run, place) values (?1, (select id from run where uid = ?2), ?3)",
            entry, placement.Run, placement.Place);
}
