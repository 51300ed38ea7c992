using System.Text;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Files;

/// <summary>What each column of a text table is.</summary>
/// <param name="Separator">Separator of the fields.</param>
/// <param name="Names">The columns' names; numbers from 1 where the table has no header.</param>
/// <param name="Starts">Where each name begins in its line, from 1.</param>
/// <param name="Line">Line of the header; 0 where there is none.</param>
internal sealed record CsvHeader(byte Separator, string[] Names, int[] Starts, int Line)
{
    /// <summary>Name of the time column in the house's own form.</summary>
    public const string Time = "t";

    private static readonly string[] TimeNames =
        [Time, "time", "second", "seconds", "t (s)", "t [s]", "time (s)", "time(s)", "time [s]", "time_s"];

    /// <summary>Whether the first column is named as times are.</summary>
    public bool HasTime => TimeNames.Contains(Names[0], StringComparer.OrdinalIgnoreCase);

    /// <summary>Whether a comma may be the decimal sign: not where it parts the fields.</summary>
    public bool DecimalComma => Separator != ',';

    /// <summary>The column that a mapping means; null where there is none.</summary>
    public int? Find(string column)
    {
        int named = Array.IndexOf(Names, column);
        return named >= 0 ? named
            : int.TryParse(column, out int number) && number >= 1 && number <= Names.Length ? number - 1
            : null;
    }

    /// <summary>Reads a line as a header.</summary>
    public static CsvHeader Of(ReadOnlySpan<byte> line, int number)
    {
        byte separator = line.Contains((byte)';') ? (byte)';' : line.Contains((byte)'\t') ? (byte)'\t' : (byte)',';
        List<string> names = [];
        List<int> starts = [];
        ReadOnlySpan<byte> rest = line;
        for (bool more = true; more;)
        {
            starts.Add(line.Length - rest.Length + 1);
            names.Add(Encoding.UTF8.GetString(Csv.Field(ref rest, separator, out more)));
        }

        // A separator behind the last name, as behind every row, makes no column.
        if (names.Count > 1 && names[^1].Length == 0)
        {
            names.RemoveAt(names.Count - 1);
        }

        return new CsvHeader(separator, [.. names], [.. starts], number);
    }

    /// <summary>The same columns without names, where the line is data already.</summary>
    public CsvHeader Unnamed() =>
        this with { Names = [.. Names.Select((_, i) => (i + 1).ToString(Invariant))], Line = 0 };

    /// <summary>Whether the line names something that is looked for; a number is a column's place, not its
    /// name.</summary>
    public bool Knows(IReadOnlyList<string> wanted) => Names.Any(name => IsLookedFor(name, wanted));

    /// <summary>Whether the line can be nothing but a header: times come first, or every name is looked for. A line of
    /// key and value in front of the table may name a channel too.</summary>
    public bool IsSurely(IReadOnlyList<string> wanted) => HasTime || Names.All(name => IsLookedFor(name, wanted));

    /// <summary>Whether a line can be the first row below this header: as many fields, a number in front.</summary>
    public bool CanStandAbove(CsvHeader row) => row.Names.Length == Names.Length
        && Csv.TryNumber(Encoding.UTF8.GetBytes(row.Names[0]), row.DecimalComma, out _);

    /// <summary>Whether every field is a number, so that the line is data.</summary>
    public bool IsData() => Names.All(name => Csv.TryNumber(Encoding.UTF8.GetBytes(name), DecimalComma, out _));

    /// <summary>Whether the line gives units of the columns, none of them scaled: seconds, volts, amperes.</summary>
    public bool IsUnits() => Names.All(name => name.Trim('(', ')', '[', ']').ToUpperInvariant() is
        "" or "S" or "SEC" or "SECOND" or "SECONDS" or "V" or "VOLT" or "VOLTS" or "A" or "AMP" or "AMPS" or "AMPERE"
        or "AMPERES");

    private static bool IsLookedFor(string name, IReadOnlyList<string> wanted) =>
        ChannelNames.Parse(name) is not null || (wanted.Contains(name) && !int.TryParse(name, out _));

    private static System.Globalization.CultureInfo Invariant => System.Globalization.CultureInfo.InvariantCulture;
}
