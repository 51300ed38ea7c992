namespace BenchRunner.Evidence.Schemas;

/// <summary>Versions and making of an evidence file.</summary>
internal static class Schema
{
    /// <summary>What <c>pragma user_version</c> says of a file of this form; a higher one is refused.</summary>
    public const int Version = 2;

    /// <summary>The oldest version that is read, and brought to this form before it is written.</summary>
    public const int OldestVersion = 1;

    /// <summary>What <c>pragma application_id</c> says of every evidence file: <c>BREV</c> in ASCII.</summary>
    public const int ApplicationId = 0x42524556;

    /// <summary>Page size, bytes: a compromise between small captures (4 k wastes less) and large ones (16 k is
    /// faster).</summary>
    public const int PageSize = 8192;

    private static readonly string[] _steps =
    [
        Tables.Sql + "\n" + Triggers.Sql + "\n" + Views.Sql,
        Additions.Sql,
    ];

    /// <summary>Statements that make an empty evidence file.</summary>
    /// <param name="version">Its version.</param>
    public static string Sql(int version = Version) => string.Join('\n', _steps[..version]);

    /// <summary>Statements that bring a file of an older version to this one. They only add: no row and no table that
    /// is there is touched.</summary>
    /// <param name="version">The file's version.</param>
    public static string Upgrade(int version) => string.Join('\n', _steps[version..]);
}
