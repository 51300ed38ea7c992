using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Holds;
using BenchRunner.Evidence.Notes;
using BenchRunner.Evidence.Stores;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Evidence.Tests;

/// <summary>Runs, captures and decisions to store; the values mean nothing but themselves.</summary>
internal static class Samples
{
    public static Verdict Valid { get; } = new([], ["saturation"], null, new Dictionary<Channel, bool>());

    public static Verdict Rejected { get; } = new(
        [new Finding("current-within", FindingClass.Retry, Channel.IdLow, 41.2, 40.8, 3.1e-6, "41.2 A, above 40.8 A")],
        [],
        7.9e-6,
        new Dictionary<Channel, bool>());

    public static FakeTimeProvider Clock() => new(new DateTimeOffset(2026, 3, 2, 8, 0, 0, TimeSpan.Zero));

    public static Sequence Sequence(string part = "WD-1200S-25", int attempts = 2, string name = "incoming") => new()
    {
        Name = name,
        Revision = 3,
        Part = part,
        Kind = DeviceKind.Mosfet,
        Position = DevicePosition.Both,
        Ratings = new DeviceRatings(1200, 160, -8, 22, 175),
        Expected = null!, // Not stored: the evidence keeps the file's bytes.
        OperatingPoints = [],
        Limits = [],
        Attempts = attempts,
        Source = new SourceFile("sequence", "incoming.yaml", [.. "format: 1\n"u8]),
    };

    public static RunHeader Header(
        string device = "W1200-0001", string? lot = null, string? again = null, bool simulated = true,
        Sequence? sequence = null) => new()
        {
            Device = device,
            Lot = lot,
            Again = again,
            Simulated = simulated,
            Sequence = sequence ?? Sequence(),
            Bench = "fake",
            Files = [new SourceFile("bench", "fake.yaml", [.. "bench: fake\n"u8])],
            Operator = "K. Weber",
            Algorithm = "1",
            Platform = "linux-x64",
        };

    public static RawTrace Trace(Channel channel, int seed, int count = 500)
    {
        Random random = new(seed);
        short[] codes = new short[count];
        for (int i = 0; i < count; i++)
        {
            codes[i] = (short)((i < count / 2 ? 800 : -600) + random.Next(-4, 5));
        }

        return new RawTrace(channel, codes, -1.5e-6, 1e-9, 0.4, 0.013, 2, -2048, 2047);
    }

    public static CaptureRow Capture(int number, string point = "rated", int seed = 1, int count = 500) => new(
        point,
        number,
        new DateTimeOffset(2026, 3, 2, 8, 0, number % 60, TimeSpan.Zero),
        [Trace(Channel.VdsLow, seed, count), Trace(Channel.IdLow, seed + 1, count)],
        600.25,
        23.5,
        new TrainSet(8e-6, 6e-6, 3e-6, 18, -4))
    {
        CountBefore = number + 40,
        CountAfter = number + 41,
    };

    public static HoldRow Hold(double? supplyCurrent = 1.2e-3, double? bound = 2e-3) => new(
        "rated", new DateTimeOffset(2026, 3, 2, 8, 0, 0, TimeSpan.Zero), 600, supplyCurrent, 599.8, 597.1, 0.1, 1.25e-3,
        bound, true);

    public static Note Note(string device = "W1200-0001", string lot = "L-1") =>
        new(device, lot, NoteKind.Release, "K. Weber", "shipped");

    public static MeasuredValue Measured(
        double? value, string quantity = "eon", string point = "rated", double? upper = 705e-6,
        Conformity? conformity = Conformity.Conforms) => new(
            point, quantity, quantity + "/10-10", value, "J", 4e-6, 9e-6, 2.3, double.PositiveInfinity, 5, null, upper,
            conformity, value is null ? "no turn-on edge" : null);

    public static DeviceDecision Decision(Outcome outcome = Outcome.Accepted, params MeasuredValue[] values) =>
        new(
            outcome,
            outcome == Outcome.Accepted ? null : $"it is {outcome}",
            values.Length == 0 ? [Measured(650e-6)] : values);

    public static IReadOnlyList<QuantityValue> Values { get; } =
    [
        new QuantityValue("eon", "eon/10-10", 651e-6, "J", null, 1e-6, 1.2e-6),
        new QuantityValue("qrr", "qrr/chord-90-25", null, "C", "no zero crossing", null, null),
    ];

    /// <summary>A whole run: zero capture, two captures (one rejected), its decision.</summary>
    public static string WholeRun(EvidenceStore store, RunHeader header, DeviceDecision? decision = null, int seed = 1)
    {
        RunWriter run = store.BeginRun(header);
        run.AddInstrument("scope", "FAKEBENCH,SCOPE,17,1.0", "17", "1.0");
        run.AddCapture(Capture(1, "zero", seed));
        run.AddHold(Hold());
        AddJudged(run, Capture(1, "rated", seed + 10), Rejected);
        AddJudged(run, Capture(2, "rated", seed + 20), Valid);
        run.Finish(decision ?? Decision());
        return run.Run;
    }

    public static void AddJudged(RunWriter run, CaptureRow capture, Verdict verdict)
    {
        long id = run.AddCapture(capture);
        run.AddVerdict(id, verdict, 40.3, 599.1);
        run.AddCaptureValues(id, Values);
    }
}
