namespace BenchRunner.Evidence.Captures;

/// <summary>Operating points that are not the sequence's: their captures are stored and shown, but never counted and
/// without measurements.</summary>
public static class UncountedPoints
{
    /// <summary>Nothing flows: what the channels show then is their offset.</summary>
    public const string Zero = "zero";

    /// <summary>Trains of low voltage before the first above 60 V.</summary>
    public const string ProvingBefore = "proving-before";

    /// <summary>The same trains after the last operating point.</summary>
    public const string ProvingAfter = "proving-after";

    /// <summary>All of them as a list of SQL.</summary>
    internal const string Sql = $"('{Zero}', '{ProvingBefore}', '{ProvingAfter}')";

    /// <summary>Whether a point is one of them.</summary>
    public static bool Has(string operatingPoint) => operatingPoint is Zero or ProvingBefore or ProvingAfter;
}
