using System.Diagnostics;
using System.Globalization;
using BenchRunner.Evidence.Audits;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests.Stores;

public sealed class KilledWriterTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Theory]
    [InlineData(1)]
    [InlineData(4)]
    [InlineData(25)]
    public void A_killed_writer_leaves_a_file_that_says_so_and_holds_every_announced_capture(int killAfter)
    {
        (string run, int announced) = WriteAndKill(killAfter);

        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        ClosedRun closed = Assert.Single(store.Closed);
        Assert.Equal(run, closed.Run);
        Assert.InRange(closed.Captures, announced, announced + 1); // The last may be stored and not announced.

        using EvidenceReader reader = EvidenceReader.Open(_folder.File);
        IReadOnlyList<StoredCapture> captures = reader.Captures(run);
        Assert.Equal(closed.Captures, captures.Count);
        foreach (StoredCapture capture in captures)
        {
            CaptureRow wanted = Samples.Capture(capture.Number, seed: DoomedWriter.Seed(capture.Number), count: 20_000);
            Assert.Equal(
                wanted.Traces.Select(trace => trace.Codes), reader.ReadTraces(capture.Id).Select(trace => trace.Codes));
        }

        object?[] outcome = Assert.Single(_folder.Rows("select outcome, reason from device_outcomes"));
        Assert.Equal("stopped", outcome[0]);
        Assert.Contains("ended before the run did", (string)outcome[1]!, StringComparison.Ordinal);
        Assert.Equal("run-closed", _folder.Value("select kind from events"));
        Assert.Empty(EvidenceAudit.Verify(_folder.File, cancel: TestContext.Current.CancellationToken).Problems);
    }

    [Fact]
    public void A_reader_beside_the_corpse_sees_the_captures_and_no_outcome()
    {
        (string run, int announced) = WriteAndKill(2);
        using EvidenceReader reader = EvidenceReader.Open(_folder.File);
        Assert.InRange(reader.Captures(run).Count, announced, announced + 1);
        Assert.Empty(_folder.Rows("select * from device_outcomes"));
        AuditProblem problem = Assert.Single(
            EvidenceAudit.Verify(_folder.File, cancel: TestContext.Current.CancellationToken).Problems);
        Assert.Equal((run, "unfinished"), (problem.Run, problem.What));
    }

    [Fact]
    public void While_it_lives_no_other_process_writes()
    {
        using Process writer = DoomedWriter.Start(_folder.File);
        try
        {
            writer.StandardOutput.ReadLine();
            EvidenceException refused =
                Assert.Throws<EvidenceException>(() => EvidenceStore.Open(_folder.File, Samples.Clock()));
            Assert.Contains($"process {writer.Id} ", refused.Message, StringComparison.Ordinal);
        }
        finally
        {
            writer.Kill();
            writer.WaitForExit();
        }

        EvidenceStore.Open(_folder.File, Samples.Clock()).Dispose();
    }

    private (string Run, int Announced) WriteAndKill(int killAfter)
    {
        using Process writer = DoomedWriter.Start(_folder.File);
        string run = writer.StandardOutput.ReadLine()!.Split(' ')[1];
        int announced = 0;
        while (announced < killAfter && writer.StandardOutput.ReadLine() is { } line)
        {
            announced = Number(line);
        }

        writer.Kill(); // SIGKILL on Unix: nothing of the process runs after it.
        while (writer.StandardOutput.ReadLine() is { } line)
        {
            announced = Number(line); // Announced before it died, and still in the pipe.
        }

        writer.WaitForExit();
        return (run, announced);
    }

    private static int Number(string line) => int.Parse(line.Split(' ')[1], CultureInfo.InvariantCulture);
}
