using BenchRunner.Acceptance.Decisions;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests.Seals;

/// <summary>The bytes of a file with three sealed runs and a note, made once.</summary>
public sealed class ThreeRuns
{
    public ThreeRuns()
    {
        using EvidenceFolder folder = new();
        List<string> runs = [];
        using (EvidenceStore store = EvidenceStore.Open(folder.File, Samples.Clock()))
        {
            foreach (int device in new[] { 1, 2, 3 })
            {
                DeviceDecision decision =
                    Samples.Decision(Outcome.Accepted, Samples.Measured(650e-6 + (device * 1e-6)));
                runs.Add(Samples.WholeRun(store, Samples.Header($"W1200-000{device}", "L-1"), decision, device));
            }

            store.AddNote(Samples.Note());
        }

        Runs = runs;
        File = System.IO.File.ReadAllBytes(folder.File);
    }

    public byte[] File { get; }

    public IReadOnlyList<string> Runs { get; }
}
