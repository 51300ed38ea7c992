using BenchRunner.Acceptance.Dialects;
using BenchRunner.Instruments.Dialects;

namespace BenchRunner.Runner.Benches;

/// <summary>Makes of a dialect file, which Acceptance reads, the dialect that Instruments speaks.</summary>
public static class DialectMapping
{
    /// <summary>The dialect of a file.</summary>
    public static Dialect ToDialect(this DialectFile file)
    {
        ArgumentNullException.ThrowIfNull(file);
        return new Dialect(file.Name, file.Identity, file.Commands);
    }
}
