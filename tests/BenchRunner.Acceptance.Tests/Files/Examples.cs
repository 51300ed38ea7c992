namespace BenchRunner.Acceptance.Tests.Files;

/// <summary>Sound files of each kind: the shipped ones, and settings.</summary>
internal static class Examples
{
    public const string Settings = """
        kind: mosfet
        position: low
        channels: { id_low: { gain: 1.013, offset: 0.96 A, skew: 4.6 ns } }
        shunt: { resistance: 20 mOhm, inductance: 100 pH }
        diode: { forward-voltage: 0.8 V }
        high-side: { gate-threshold: 2.4 V }
        dead-time: 300 ns
        integration-time: 100 ns
        definitions: { qrr: qrr/fall-10 }
        """;

    public static string Sequence => File.ReadAllText(Repository.SequencePath);

    public static string Bench => File.ReadAllText(Repository.BenchPath);

    public static string Dialect => File.ReadAllText(Repository.PathOf("sequences", "dialects", "generic-scope.yaml"));

    public static string Tolerances => File.ReadAllText(Repository.TolerancesPath);

    public static (string Kind, string Text)[] All =>
    [
        ("sequence", Sequence), ("bench", Bench), ("dialect", Dialect), ("settings", Settings),
        ("tolerances", Tolerances),
    ];

    /// <summary>A file with one text in place of another, which must be there.</summary>
    public static string With(this string text, string found, string replacement)
    {
        Assert.Contains(found, text, StringComparison.Ordinal);
        return text.Replace(found, replacement, StringComparison.Ordinal);
    }
}
