using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Files;

/// <summary>A bench and the dialects that it names, read and checked.</summary>
/// <param name="Bench">The bench; null where its file is wrong.</param>
/// <param name="Dialects">Name to dialect.</param>
internal sealed record BenchFiles(Bench? Bench, IReadOnlyDictionary<string, DialectFile> Dialects)
{
    /// <summary>Reads them.</summary>
    /// <param name="path">The bench file.</param>
    /// <param name="problems">Takes every problem of every file.</param>
    public static BenchFiles Read(string path, List<Problem> problems)
    {
        Read<Bench> bench = BenchFile.Read(path);
        problems.AddRange(bench.Problems);
        var dialects = new Dictionary<string, DialectFile>();
        foreach ((string role, InstrumentSetup setup) in bench.Value?.Roles ?? new Dictionary<string, InstrumentSetup>())
        {
            Read<DialectFile> found =
                DialectReader.Find(setup.Dialect, role, ExampleFiles.DialectFolders(path), setup.Where);
            problems.AddRange(found.Problems);
            if (found.Value is { } dialect)
            {
                dialects[setup.Dialect] = dialect;
            }
        }

        return new BenchFiles(bench.Value, dialects);
    }
}
