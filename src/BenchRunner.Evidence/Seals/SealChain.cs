using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Seals;

/// <summary>The chain of seals of one origin.</summary>
internal static class SealChain
{
    /// <summary>Seals a run: a digest of what it stored, chained to the seal before it. Part of the caller's
    /// transaction.</summary>
    /// <returns>The seal, lower-case hexadecimal.</returns>
    public static string Append(SqlSession session, long run, string sealedAt)
    {
        (long origin, string originUid, string runUid) = session.Read(
            "select o.id, o.uid, r.uid from run r join origin o on o.id = r.origin where r.id = ?1",
            row => (row.GetInt64(0), row.GetString(1), row.GetString(2)),
            run)[0];
        (long ordinal, string previous) = session.Read(
            "select ordinal, seal from seal where origin = ?1 order by ordinal desc limit 1",
            row => (row.GetInt64(0), row.GetString(1)),
            origin) is [var last] ? last : (0, string.Empty);
        string digest = CanonicalForm.Digest(session, run);
        string seal = CanonicalForm.Seal(originUid, ordinal + 1, "run", runUid, sealedAt, digest, previous);
        session.Execute(
            """
            insert into seal (origin, ordinal, kind, run, sealed_at, digest, previous, seal)
            values (?1, ?2, 'run', ?3, ?4, ?5, ?6, ?7)
            """,
            origin, ordinal + 1, run, sealedAt, digest, previous, seal);
        return seal;
    }
}
