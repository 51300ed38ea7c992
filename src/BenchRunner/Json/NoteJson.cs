using System.Text.Json.Nodes;
using BenchRunner.Evidence.Entries;
using BenchRunner.Evidence.Notes;

namespace BenchRunner.Json;

/// <summary>The document of <c>evidence note --json</c>.</summary>
internal static class NoteJson
{
    public static void Write(Note note, SealedEntry entry) => JsonOutput.Write(new JsonObject
    {
        ["entry"] = entry.Entry,
        ["at"] = entry.At,
        ["device"] = note.Device,
        ["lot"] = note.Lot,
        ["kind"] = NoteWords.Of(note.Kind),
        ["by"] = note.By,
        ["because"] = note.Because,
        ["seal"] = entry.Seal,
    });
}
