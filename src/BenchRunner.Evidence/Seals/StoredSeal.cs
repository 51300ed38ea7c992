using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Seals;

/// <summary>A seal as it stands in the file.</summary>
internal sealed record StoredSeal(
    long Ordinal, string Kind, long? RunRow, string? Run, string SealedAt, string Digest, string Previous, string Seal)
{
    /// <summary>The seals of origin <c>?1</c> in the order of the chain.</summary>
    public const string Sql = """
        select s.ordinal, s.kind, r.id, r.uid, s.sealed_at, s.digest, s.previous, s.seal
        from seal s left join run r on r.id = s.run where s.origin = ?1 order by s.ordinal
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
