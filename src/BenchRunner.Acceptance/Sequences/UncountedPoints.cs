namespace BenchRunner.Acceptance.Sequences;

/// <summary>Names of operating points that are not the sequence's: captures of the bench itself, stored and shown, but
/// never counted and without measurements.</summary>
public static class UncountedPoints
{
    /// <summary>No train is fired: what the channels show then is their offset.</summary>
    public const string Zero = "zero";

    /// <summary>Trains of low voltage before the first above 60 V.</summary>
    public const string ProvingBefore = "proving-before";

    /// <summary>The same trains after the last operating point.</summary>
    public const string ProvingAfter = "proving-after";

    /// <summary>All of them.</summary>
    public static IReadOnlyList<string> All { get; } = [Zero, ProvingBefore, ProvingAfter];

    /// <summary>Whether a point is one of them.</summary>
    /// <param name="operatingPoint">Its name.</param>
    public static bool Has(string operatingPoint) => All.Contains(operatingPoint);
}
