using System.Buffers;
using System.Globalization;
using System.Text;
using System.Text.Encodings.Web;
using System.Text.Json;

namespace BenchRunner.Evidence.Queries;

/// <summary>Answers as text: a table for people, CSV for spreadsheets, JSON for programs.</summary>
public static class QueryText
{
    private const string Nothing = "-";
    private static readonly SearchValues<char> FormulaStarts = SearchValues.Create("=+-@\t\r");
    private static readonly SearchValues<char> QuotedInCsv = SearchValues.Create(",\"\r\n");

    /// <summary>An aligned table: numbers to the right with six digits in plain SI, NULL as <c>-</c>, no trailing
    /// blanks.</summary>
    /// <remarks>Control and direction characters come escaped, so that no stored text can play with a
    /// terminal.</remarks>
    public static string Table(QueryTable table)
    {
        ArgumentNullException.ThrowIfNull(table);
        string[][] cells = [.. table.Rows.Select(row => row.Select(Cell).ToArray())];
        string[] headers = [.. table.Columns.Select(Escape)];
        int columns = headers.Length;
        int[] widths = new int[columns];
        bool[] right = new bool[columns];
        for (int i = 0; i < columns; i++)
        {
            widths[i] = cells.Select(row => row[i].Length).Append(headers[i].Length).Max();
            right[i] = table.Rows.Any(row => row[i] is long or double)
                && table.Rows.All(row => row[i] is null or long or double);
        }

        StringBuilder text = new();
        Line(text, headers, widths, right);
        Line(text, [.. widths.Select(width => new string('-', width))], widths, right);
        foreach (string[] row in cells)
        {
            Line(text, row, widths, right);
        }

        return text.ToString();
    }

    /// <summary>CSV after RFC 4180 with line feeds: a header, then the rows; NULL is empty, numbers are
    /// exact.</summary>
    /// <remarks>A text that a spreadsheet would take for a formula comes with an apostrophe before it.</remarks>
    public static string Csv(QueryTable table)
    {
        ArgumentNullException.ThrowIfNull(table);
        StringBuilder text = new();
        text.AppendJoin(',', table.Columns.Select(CsvText)).Append('\n');
        foreach (IReadOnlyList<object?> row in table.Rows)
        {
            text.AppendJoin(',', row.Select(value => value is string words ? CsvText(words) : Exact(value) ?? ""))
                .Append('\n');
        }

        return text.ToString();
    }

    /// <summary>One JSON document: <c>{ "format": 1, "columns": [], "rows": [[]] }</c>.</summary>
    /// <remarks>JSON has no infinity: it comes as null, as NULL does. Bytes come as hexadecimal.</remarks>
    public static string Json(QueryTable table)
    {
        ArgumentNullException.ThrowIfNull(table);
        ArrayBufferWriter<byte> bytes = new();
        using (Utf8JsonWriter json = new(bytes, new() { Encoder = JavaScriptEncoder.UnsafeRelaxedJsonEscaping }))
        {
            json.WriteStartObject();
            json.WriteNumber("format", 1);
            json.WriteStartArray("columns");
            foreach (string column in table.Columns)
            {
                json.WriteStringValue(column);
            }

            json.WriteEndArray();
            json.WriteStartArray("rows");
            foreach (IReadOnlyList<object?> row in table.Rows)
            {
                json.WriteStartArray();
                foreach (object? value in row)
                {
                    Write(json, value);
                }

                json.WriteEndArray();
            }

            json.WriteEndArray();
            json.WriteEndObject();
        }

        return Encoding.UTF8.GetString(bytes.WrittenSpan) + "\n";
    }

    private static void Write(Utf8JsonWriter json, object? value)
    {
        switch (value)
        {
            case long number:
                json.WriteNumberValue(number);
                break;
            case double number when double.IsFinite(number):
                json.WriteNumberValue(number);
                break;
            case null or double:
                json.WriteNullValue();
                break;
            default:
                json.WriteStringValue(Exact(value));
                break;
        }
    }

    private static void Line(StringBuilder text, string[] cells, int[] widths, bool[] right)
    {
        StringBuilder line = new();
        for (int i = 0; i < cells.Length; i++)
        {
            line.Append(i == 0 ? "" : "  ");
            line.Append(right[i] ? cells[i].PadLeft(widths[i]) : cells[i].PadRight(widths[i]));
        }

        text.Append(line.ToString().TrimEnd()).Append('\n');
    }

    private static string Cell(object? value) => value switch
    {
        null => Nothing,
        double number => number.ToString("G6", CultureInfo.InvariantCulture),
        _ => Escape(Exact(value)!),
    };

    private static string? Exact(object? value) => value switch
    {
        null => null,
        long number => number.ToString(CultureInfo.InvariantCulture),
        double number => number.ToString("R", CultureInfo.InvariantCulture),
        byte[] bytes => Convert.ToHexStringLower(bytes),
        _ => value.ToString(),
    };

    private static string CsvText(string text)
    {
        bool formula = text.Length > 0 && FormulaStarts.Contains(text[0]);
        return formula || text.AsSpan().IndexOfAny(QuotedInCsv) >= 0
            ? $"\"{(formula ? "'" : "")}{text.Replace("\"", "\"\"", StringComparison.Ordinal)}\""
            : text;
    }

    private static string Escape(string text)
    {
        if (!text.Any(IsUnseen))
        {
            return text;
        }

        StringBuilder seen = new();
        foreach (char character in text)
        {
            seen.Append(IsUnseen(character) ? $"\\u{(int)character:x4}" : character.ToString());
        }

        return seen.ToString();
    }

    private static bool IsUnseen(char character) =>
        char.IsControl(character) || CharUnicodeInfo.GetUnicodeCategory(character) == UnicodeCategory.Format
        || character is '\u2028' or '\u2029';
}
