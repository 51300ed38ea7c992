using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Seals;

/// <summary>The chain of seals of one origin.</summary>
internal static class SealChain
{
    /// <summary>Seals a run: a digest of what it stored, chained to the seal before it. Part of the caller's
    /// transaction.</summary>
    /// <returns>The seal, lower-case hexadecimal.</returns>
    public static string AppendRun(SqlSession session, long run, string sealedAt)
    {
        (long origin, string originUid, string runUid) = session.Read(
            "select o.id, o.uid, r.uid from run r join origin o on o.id = r.origin where r.id = ?1",
            row => (row.GetInt64(0), row.GetString(1), row.GetString(2)),
            run)[0];
        string digest = CanonicalForm.OfRun(session, run);
        return Append(session, (origin, originUid), "run", (run, runUid), sealedAt, digest);
    }

    /// <summary>Seals an entry, as a run is sealed.</summary>
    /// <returns>The seal, lower-case hexadecimal.</returns>
    public static string AppendEntry(SqlSession session, long entry, string sealedAt)
    {
        (long origin, string originUid, string entryUid) = session.Read(
            "select o.id, o.uid, e.uid from entry e join origin o on o.id = e.origin where e.id = ?1",
            row => (row.GetInt64(0), row.GetString(1), row.GetString(2)),
            entry)[0];
        string digest = CanonicalForm.OfEntry(session, entry);
        return Append(session, (origin, originUid), "entry", (null, entryUid), sealedAt, digest);
    }

    /// <summary>The number of an origin's next seal.</summary>
    public static long NextOrdinal(SqlSession session, long origin) => Last(session, origin).Ordinal + 1;

    private static string Append(
        SqlSession session, (long Row, string Uid) origin, string kind, (long? Run, string Uid) what, string sealedAt,
        string digest)
    {
        (long ordinal, string previous) = Last(session, origin.Row);
        string seal = CanonicalForm.Seal(origin.Uid, ordinal + 1, kind, what.Uid, sealedAt, digest, previous);
        session.Execute(
            """
            insert into seal (origin, ordinal, kind, run, sealed_at, digest, previous, seal)
            values (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8)
            """,
            origin.Row, ordinal + 1, kind, what.Run, sealedAt, digest, previous, seal);
        return seal;
    }

    private static (long Ordinal, string Seal) Last(SqlSession session, long origin) =>
        session.Read(
            "select ordinal, seal from seal where origin = ?1 order by ordinal desc limit 1",
            row => (row.GetInt64(0), row.GetString(1)),
            origin) is [var last] ? last : (0, string.Empty);
}
