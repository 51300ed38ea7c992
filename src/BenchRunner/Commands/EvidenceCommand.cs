using System.CommandLine;
using BenchRunner.Evidence.Entries;
using BenchRunner.Evidence.Notes;
using BenchRunner.Evidence.Stores;
using BenchRunner.Files;
using BenchRunner.Json;

namespace BenchRunner.Commands;

/// <summary><c>evidence note</c>: what a person did with a device after its runs.</summary>
internal static class EvidenceCommand
{
    public static Command Build() => new("evidence", "what concerns the evidence file itself") { BuildNote() };

    private static Command BuildNote()
    {
        var device = new Option<string>("--device") { Description = "serial of the device", Required = true };
        var lot = new Option<string>("--lot") { Description = "lot in which it was measured", Required = true };
        var kind = new Option<string>("--kind")
        {
            Description = $"what was done with it: {NoteWords.Choice}",
            Required = true,
        };
        var by = new Option<string>("--by") { Description = "who says so", Required = true };
        var because = new Option<string>("--because") { Description = "why", Required = true };
        Option<string?> evidence = CommonOptions.Evidence();
        Option<bool> json = CommonOptions.Json();
        var command = new Command(
            "note",
            "adds what became of a device after its runs, under a seal of its own; changes no outcome.\n"
                + "Example: benchrunner evidence note --device W1200-0001 --lot L-7 --kind scrap --by 'A. Person' "
                + "--because 'lead bent'")
        {
            device, lot, kind, by, because, evidence, json,
        };
        command.SetAction(parsed => Add(
            parsed.GetValue(evidence),
            new Note(
                parsed.GetRequiredValue(device), parsed.GetRequiredValue(lot),
                NoteWords.Kind(parsed.GetRequiredValue(kind)), parsed.GetRequiredValue(by),
                parsed.GetRequiredValue(because)),
            parsed.GetValue(json)));
        return command;
    }

    private static int Add(string? evidence, Note note, bool json)
    {
        string file = EvidenceFiles.ToRead(evidence);
        if (!File.Exists(file))
        {
            throw new InputException($"{file}: there is no such evidence file; name one that a run has written");
        }

        using EvidenceStore store = EvidenceStore.Open(file, TimeProvider.System);
        SealedEntry entry = store.AddNote(note);
        if (json)
        {
            NoteJson.Write(note, entry);
        }
        else
        {
            System.Console.WriteLine(
                $"{file}: {note.Device} of lot {note.Lot}: {NoteWords.Of(note.Kind)}, by {note.By}: {note.Because}");
        }

        return ExitCode.Done;
    }
}
