using System.Diagnostics;

namespace BenchRunner.Evidence.Notes;

/// <summary>The words of the kinds of notes, the same in the evidence, on the command line and in JSON.</summary>
public static class NoteWords
{
    /// <summary>All words, as a message offers them.</summary>
    public static string Choice { get; } =
        string.Join(" or ", [string.Join(", ", All[..^1].Select(Of)), Of(All[^1])]);

    private static NoteKind[] All => Enum.GetValues<NoteKind>();

    /// <summary>The word of a kind.</summary>
    public static string Of(NoteKind kind) => kind switch
    {
        NoteKind.Release => "release",
        NoteKind.Scrap => "scrap",
        NoteKind.Return => "return",
        NoteKind.Concession => "concession",
        _ => throw new UnreachableException(),
    };

    /// <summary>The kind of a word.</summary>
    /// <exception cref="NoteRefusedException">No kind has the word.</exception>
    public static NoteKind Kind(string word) =>
        Array.FindIndex(All, kind => Of(kind) == word) is >= 0 and var at
            ? All[at]
            : throw new NoteRefusedException($"'{word}' is no kind of note; expected {Choice}.");
}
