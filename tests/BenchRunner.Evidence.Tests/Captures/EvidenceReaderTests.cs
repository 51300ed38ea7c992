using System.Text;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Stores;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Evidence.Tests.Captures;

public sealed class EvidenceReaderTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void A_capture_comes_back_as_it_was_given()
    {
        CaptureRow given = Samples.Capture(3, "zero") with
        {
            Traces =
            [
                Samples.Trace(Channel.IdLow, 5, 777),
                Samples.Trace(Channel.VdsLow, 6, 123) with { Origin = -0.0, Reference = 127.5, LowRail = -128 },
                Samples.Trace(Channel.Vbus, 7, 1) with { Increment = 1.0 / 3, TimeOrigin = double.Epsilon },
            ],
            Train = null,
            BusVoltage = null,
            CountAfter = null,
        };
        string run;
        using (EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock()))
        {
            RunWriter writer = store.BeginRun(Samples.Header());
            run = writer.Run;
            writer.AddCapture(given);
            Samples.AddJudged(writer, Samples.Capture(1), Samples.Rejected);
        }

        using EvidenceReader reader = EvidenceReader.Open(_folder.File);
        IReadOnlyList<StoredCapture> captures = reader.Captures(run);
        Assert.Equal(
            new StoredCapture(captures[0].Id, "zero", 3, given.TakenAt, null, 23.5, null, null)
            {
                CountBefore = given.CountBefore,
                CountAfter = null,
            },
            captures[0]);
        Assert.Equal((Samples.Capture(1).CountBefore, Samples.Capture(1).CountAfter),
            (captures[1].CountBefore, captures[1].CountAfter));
        Assert.Equal(Samples.Capture(1).Train, captures[1].Train);
        Assert.False(captures[1].Valid);

        Assert.Equal(
            [("bench", "fake.yaml", "bench: fake\n"), ("sequence", "incoming.yaml", "format: 1\n")],
            reader.Files(run).Select(file => (file.Role, file.Path, Encoding.UTF8.GetString(file.Bytes))));
        IReadOnlyList<RawTrace> traces = reader.ReadTraces(captures[0].Id);
        Assert.Equal(given.Traces.Count, traces.Count);
        foreach ((RawTrace wanted, RawTrace found) in given.Traces.Zip(traces))
        {
            Assert.Equal(wanted.Codes, found.Codes);
            Assert.Equal(wanted with { Codes = found.Codes }, found);
        }
    }

    [Fact]
    public void What_is_not_there_is_said()
    {
        Exception missing = Assert.Throws<EvidenceException>(() => EvidenceReader.Open(_folder.File));
        Assert.Contains("no such evidence file", missing.Message, StringComparison.Ordinal);
        EvidenceStore.Open(_folder.File, Samples.Clock()).Dispose();
        using EvidenceReader reader = EvidenceReader.Open(_folder.File);
        Assert.Empty(reader.Captures("none"));
        Assert.Empty(reader.Files("none"));
        Exception unknown = Assert.Throws<EvidenceException>(() => reader.ReadTraces(7));
        Assert.Contains("capture 7 has no traces", unknown.Message, StringComparison.Ordinal);
    }
}
