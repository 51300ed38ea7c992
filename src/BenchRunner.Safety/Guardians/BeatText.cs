using System.Globalization;

namespace BenchRunner.Safety.Guardians;

/// <summary>The words on the pipe between runner and guardian, a line each.</summary>
/// <remarks>
/// Beats are numbered from 1 without a gap, so that what was lost, doubled or forged is seen:
/// <c>polled 17 600 598.7 598.6</c>: number, highest voltage commanded and seen since the last proof, last reading that
/// could be believed, V; a dash for none; <c>doubted</c> where the voltmeter is no longer believed.
/// </remarks>
public static class BeatText
{
    /// <summary>Longest line that can be a beat, characters.</summary>
    public const int LongestLine = 256;

    /// <summary>The guardian's answer to beat N: it is alive and has heard it.</summary>
    public const string Answer = "heard";

    private const string None = "-";
    private const string Doubted = "doubted";

    private static readonly Dictionary<string, HeardKind> _words = new()
    {
        ["polled"] = HeardKind.Polled,
        ["making-safe"] = HeardKind.MakingSafe,
        ["done"] = HeardKind.Done,
        ["left"] = HeardKind.Left,
    };

    /// <summary>Writes a beat.</summary>
    /// <param name="kind">Polled, MakingSafe, Done or Left.</param>
    /// <param name="number">Its number.</param>
    /// <param name="commanded">Highest voltage commanded, V.</param>
    /// <param name="seen">Highest voltage seen, V.</param>
    /// <param name="believed">Last reading that could be believed, V; null: none.</param>
    /// <param name="isDoubted">Whether the voltmeter has shown what cannot be true.</param>
    public static string Write(
        HeardKind kind, long number, double commanded, double seen, double? believed, bool isDoubted = false) =>
        string.Create(
            CultureInfo.InvariantCulture,
            $"{_words.Single(word => word.Value == kind).Key} {number} {commanded:0.##} {seen:0.##} ")
        + (isDoubted ? Doubted : believed is { } volts ? volts.ToString("0.##", CultureInfo.InvariantCulture) : None);

    /// <summary>Reads a line.</summary>
    /// <param name="line">What came.</param>
    /// <param name="due">The number that is due.</param>
    public static Heard Read(string line, long due)
    {
        ArgumentNullException.ThrowIfNull(line);
        string[] words = line.Split(' ');
        return words.Length == 5
            && line.Length <= LongestLine
            && _words.TryGetValue(words[0], out HeardKind kind)
            && long.TryParse(words[1], NumberStyles.None, CultureInfo.InvariantCulture, out long number)
            && number == due
            && Volts(words[2]) is { } commanded
            && Volts(words[3]) is { } seen
            && (words[4] is None or Doubted || Volts(words[4]) is not null)
            ? new Heard(kind, commanded, seen, Volts(words[4])) { IsDoubted = words[4] == Doubted }
            : new Heard(HeardKind.Malformed, Text: line.Length <= 60 ? line : line[..60] + "…");
    }

    private static double? Volts(string word) =>
        double.TryParse(word, NumberStyles.AllowDecimalPoint, CultureInfo.InvariantCulture, out double volts)
            && double.IsFinite(volts) ? volts : null;
}
