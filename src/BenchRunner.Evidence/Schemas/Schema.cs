namespace BenchRunner.Evidence.Schemas;

/// <summary>Version and making of an evidence file.</summary>
internal static class Schema
{
    /// <summary>What <c>pragma user_version</c> says of a file of this form; a higher one is refused.</summary>
    public const int Version = 1;

    /// <summary>What <c>pragma application_id</c> says of every evidence file: <c>BREV</c> in ASCII.</summary>
    public const int ApplicationId = 0x42524556;

    /// <summary>Page size, bytes: a compromise between small captures (4 k wastes less) and large ones (16 k is
    /// faster).</summary>
    public const int PageSize = 8192;

    /// <summary>Statements that make an empty evidence file.</summary>
    public static string Sql { get; } = Tables.Sql + "\n" + Triggers.Sql + "\n" + Views.Sql;
}
