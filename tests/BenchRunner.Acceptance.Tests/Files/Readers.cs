using System.Text;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Settings;
using BenchRunner.Acceptance.Tolerances;

namespace BenchRunner.Acceptance.Tests.Files;

/// <summary>Reads a file by the kind that its name starts with.</summary>
internal static class Readers
{
    public static SourceFile Source(string name, byte[] bytes) => new(name.Split('-', '.')[0], name, bytes);

    public static SourceFile Source(string name, string text) => Source(name, Encoding.UTF8.GetBytes(text));

    public static IReadOnlyList<Problem> Problems(SourceFile source) => source.Role switch
    {
        "sequence" => Checked(SequenceFile.Read(source)),
        "bench" => Checked(BenchFile.Read(source)),
        "dialect" => Checked(DialectReader.Read(source)),
        "settings" => Checked(SettingsFile.Read(source)),
        "tolerances" => Checked(TolerancesFile.Read(source)),
        _ => throw new ArgumentException(source.Role),
    };

    /// <summary>The problems, of which there are some exactly where there is no model.</summary>
    private static IReadOnlyList<Problem> Checked<T>(Read<T> read)
        where T : class
    {
        Assert.Equal(read.Value is null, read.Problems.Count > 0);
        return read.Problems;
    }
}
