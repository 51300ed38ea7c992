using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Tests.Workplaces;

namespace BenchRunner.Runner.Tests.Benches;

/// <summary>Runs alone: it makes the whole process believe that it lies in another folder.</summary>
[Collection(nameof(MissingProgramTests))]
[CollectionDefinition(nameof(MissingProgramTests), DisableParallelization = true)]
public sealed class MissingProgramTests : IDisposable
{
    private const string Base = "APP_CONTEXT_BASE_DIRECTORY";
    private readonly Workplace _place = new();
    private readonly object? _before = AppContext.GetData(Base);

    public void Dispose()
    {
        AppContext.SetData(Base, _before);
        _place.Dispose();
    }

    [Fact]
    public async Task A_missing_program_is_named_with_what_to_do()
    {
        var bench = _place.Bench();
        AppContext.SetData(Base, _place.File(""));

        var failure = await Assert.ThrowsAsync<BenchException>(() => FakeBenchProcess.Start(
            bench, Workplace.Device, null, TimeProvider.System, TestContext.Current.CancellationToken));

        Assert.Contains(_place.File("fakebench"), failure.Message, StringComparison.Ordinal);
        Assert.Contains("build the whole solution", failure.Message, StringComparison.Ordinal);
    }
}
