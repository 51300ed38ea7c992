using BenchRunner.Evidence.Audits;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests.Stores;

/// <summary>The database's own fault, at every page at which it can come: success or a reported failure, nothing
/// between.</summary>
public sealed class FullDiskTests : IDisposable
{
    private const int PageSize = 8192;
    private const int Captures = 3;

    private readonly EvidenceFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void A_file_that_is_full_at_any_page_keeps_what_it_announced_and_takes_nothing_more()
    {
        EvidenceStore.Open(_folder.File, Samples.Clock()).Dispose();
        byte[] empty = File.ReadAllBytes(_folder.File);
        bool whole = false;
        int trials = 0;
        for (int pages = empty.Length / PageSize; !whole; pages++)
        {
            Assert.InRange(++trials, 1, 200);
            File.WriteAllBytes(_folder.File, empty);
            List<int> announced = [];
            whole = Trial((long)pages * PageSize, announced);

            EvidenceStore.Open(_folder.File, Samples.Clock()).Dispose();
            Assert.Empty(EvidenceAudit.Verify(_folder.File, cancel: TestContext.Current.CancellationToken).Problems);
            using EvidenceReader reader = EvidenceReader.Open(_folder.File);
            string? run = (string?)_folder.Value("select uid from run");
            Assert.Equal(announced, run is null ? [] : reader.Captures(run).Select(capture => capture.Number));
            if (run is not null)
            {
                Assert.Equal(whole ? "accepted" : "stopped", _folder.Value("select outcome from device_outcomes"));
            }
        }

        Assert.True(trials > 10, $"only {trials} trials: the fault came nowhere");
    }

    /// <summary>One run in a file of a largest size.</summary>
    /// <returns>Whether it came to its end; else every door has refused.</returns>
    private bool Trial(long largest, List<int> announced)
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock(), largest);
        RunWriter? run = null;
        try
        {
            run = store.BeginRun(Samples.Header());
            for (int number = 1; number <= Captures; number++)
            {
                long capture = run.AddCapture(Samples.Capture(number, count: 40_000));
                announced.Add(number);
                run.AddVerdict(capture, Samples.Valid, 40, 600);
                run.AddCaptureValues(capture, Samples.Values);
            }

            run.Finish(Samples.Decision());
            return true;
        }
        catch (EvidenceException first)
        {
            Assert.Contains("is full", first.Message, StringComparison.Ordinal);
            Exception second = Assert.Throws<EvidenceException>(() => store.BeginRun(Samples.Header()));
            Assert.Equal(first.Message, second.Message);
            if (run is not null)
            {
                Assert.Throws<EvidenceException>(() => run.AddCapture(Samples.Capture(9)));
                Assert.Throws<EvidenceException>(() => run.AddVerdict(1, Samples.Valid, null, null));
                Assert.Throws<EvidenceException>(() => run.Finish(Samples.Decision()));
                Assert.Throws<EvidenceException>(() => run.Stop("full"));
            }

            return false;
        }
    }
}
