using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Seals;

/// <summary>A seal as it stands in the file.</summary>
/// <param name="Ordinal">Its number within the origin.</param>
/// <param name="Kind"><c>run</c> or <c>entry</c>.</param>
/// <param name="Row">Row of the run or entry; null: it is not there.</param>
/// <param name="Uid">Identity of the run or entry; null: it is not there.</param>
/// <param name="SealedAt">When it was sealed.</param>
/// <param name="Digest">Hash of what was sealed.</param>
/// <param name="Previous">The seal before it.</param>
/// <param name="Seal">The seal.</param>
internal sealed record StoredSeal(
    long Ordinal, string Kind, long? Row, string? Uid, string SealedAt, string Digest, string Previous, string Seal)
{
    /// <summary>The seals of origin <c>?1</c> in the order of the chain.</summary>
    public const string Sql = """
        select s.ordinal, s.kind, coalesce(r.id, e.id), coalesce(r.uid, e.uid), s.sealed_at, s.digest, s.previous,
          s.seal
        from seal s
        left join run r on r.id = s.run and s.kind = 'run'
        left join entry e on e.origin = s.origin and e.ordinal = s.ordinal and s.kind = 'entry'
        where s.origin = ?1 order by s.ordinal
        """;

    public static StoredSeal Of(SqliteDataReader row) => new(
        row.GetInt64(0),
        row.GetString(1),
        row.IsDBNull(2) ? null : row.GetInt64(2),
        row.IsDBNull(3) ? null : row.GetString(3),
        row.GetString(4),
        row.GetString(5),
        row.GetString(6),
        row.GetString(7));
}
