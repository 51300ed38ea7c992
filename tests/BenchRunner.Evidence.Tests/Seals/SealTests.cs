using System.Diagnostics;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Evidence.Entries;
using BenchRunner.Evidence.Notes;
using BenchRunner.Evidence.Placements;
using BenchRunner.Evidence.Stores;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Evidence.Tests.Seals;

public sealed class SealTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void A_second_program_forms_the_same_seals_from_the_document_alone()
    {
        Assert.SkipUnless(File.Exists("/usr/bin/python3"), "python3 is not installed (apt: python3)");
        List<string> expected = [];
        using (EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock()))
        {
            for (int device = 1; device <= 3; device++)
            {
                RunWriter run = store.BeginRun(Samples.Header($"W1200-000{device}", device == 3 ? null : "Lös Ω"));
                run.AddInstrument("scope", "FAKEBENCH,SCOPE,17,1.0", null, "");
                run.AddInstrument("pulser", "FAKEBENCH,PULSER,0,1.0", "3", "1.0");
                run.AddEvent(new BenchEvent(
                    Samples.Clock().GetUtcNow(), "watch", Severity.Warning, "late", "two\nlines; Ω"));
                run.AddCapture(Samples.Capture(1, "zero") with { Train = null });
                run.AddHold(Samples.Hold());
                run.AddHold(Samples.Hold(supplyCurrent: null, bound: null));
                Samples.AddJudged(run, Samples.Capture(1, seed: device), Samples.Rejected);
                run.AddCapture(Samples.Capture(2) with { Traces = [Noise(device)] });
                string seal = device == 2
                    ? run.Stop("interlock opened")
                    : run.Finish(Samples.Decision(
                        Outcome.Rejected, Samples.Measured(-0.0), Samples.Measured(null, "qrr")));
                expected.Add($"{run.Run} {seal}");
                if (device == 2)
                {
                    SealedEntry note = store.AddNote(
                        new Note("W1200-0002", "Lös Ω", NoteKind.Concession, "K. Weber", "used on\nbench Ω"));
                    expected.Add($"{note.Entry} {note.Seal}");
                    SealedEntry placement = store.AddPlacement(new Placement(run.Run, "bin Ω", "K. Weber"));
                    expected.Add($"{placement.Entry} {placement.Seal}");
                }
            }
        }

        using Process process = Process.Start(new ProcessStartInfo(
            "/usr/bin/python3", [Path.Combine(AppContext.BaseDirectory, "Seals", "reseal.py"), _folder.File])
        { RedirectStandardOutput = true })!;
        string[] lines = process.StandardOutput.ReadToEnd().Split('\n', StringSplitOptions.RemoveEmptyEntries);
        process.WaitForExit();
        Assert.Equal(expected, lines);
        Assert.Equal(0, process.ExitCode);
        Assert.Contains(_folder.Rows("select codec from trace"), row => row[0] is 0L);
    }

    [Fact]
    public void The_chain_starts_with_nothing_and_each_seal_names_the_one_before()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        Samples.WholeRun(store, Samples.Header());
        Samples.WholeRun(store, Samples.Header());
        List<object?[]> seals = _folder.Rows("select previous, seal, ordinal from seal order by ordinal");
        Assert.Equal(("", seals[0][1], 1L, 2L), (seals[0][0], seals[1][0], seals[0][2], seals[1][2]));
        Assert.Matches("^[0-9a-f]{64}$", (string)seals[1][1]!);
    }

    /// <summary>Full-scale noise, which no codec shortens.</summary>
    private static RawTrace Noise(int seed)
    {
        Random random = new(seed);
        short[] codes = new short[300];
        for (int i = 0; i < codes.Length; i++)
        {
            codes[i] = (short)random.Next(short.MinValue, short.MaxValue + 1);
        }

        return Samples.Trace(Channel.Vbus, 1) with { Codes = codes };
    }
}
