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
    public void Captures_of_a_device_are_found_in_all_its_runs_with_their_newest_verdict()
    {
        string first, second;
        using (EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock()))
        {
            RunWriter writer = store.BeginRun(Samples.Header());
            first = writer.Run;
            writer.AddCapture(Samples.Capture(1, "zero"));
            Samples.AddJudged(writer, Samples.Capture(1), Samples.Rejected);
            writer.Finish(Samples.Decision(Acceptance.Decisions.Outcome.Rejected));
            second = Samples.WholeRun(store, Samples.Header(lot: null));
        }

        using EvidenceReader reader = EvidenceReader.Open(_folder.File);
        string device = Assert.Single(reader.Devices(9));
        IReadOnlyList<FoundCapture> found = reader.CapturesOf(device);

        Assert.Equal(
            [(first, "zero", 1, false), (first, "rated", 1, true)],
            found.Where(one => one.Run == first)
                .Select(one => (one.Run, one.OperatingPoint, one.Number, one.Findings is not null)));
        Assert.Contains(Samples.Rejected.Findings[0].Criterion, found[1].Findings, StringComparison.Ordinal);
        Assert.All(found.Skip(2), one => Assert.Equal(second, one.Run));
        Assert.Equal(
            reader.Captures(first).Concat(reader.Captures(second)).Select(one => one.Id), found.Select(one => one.Id));
        Assert.Empty(reader.CapturesOf("W1200-0099"));
    }

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
