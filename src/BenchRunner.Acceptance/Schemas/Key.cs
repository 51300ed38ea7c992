namespace BenchRunner.Acceptance.Schemas;

/// <summary>A key of a block.</summary>
/// <param name="Name">The key.</param>
/// <param name="Shape">What its value may be.</param>
/// <param name="IsRequired">Whether it must be there.</param>
internal sealed record Key(string Name, Shape Shape, bool IsRequired)
{
    /// <summary>A key that must be there.</summary>
    public static Key Needed(string name, Shape shape) => new(name, shape, true);

    /// <summary>A key that may be left out.</summary>
    public static Key Optional(string name, Shape shape) => new(name, shape, false);
}
