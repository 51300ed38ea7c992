using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Console;

/// <summary>The decisions as aligned lines: quantity, value ± expanded uncertainty, limits, conformity.</summary>
internal static class DecisionTable
{
    public static IEnumerable<string> Lines(DeviceDecision decision, Palette palette)
    {
        List<MeasuredValue> limited = [.. decision.Values.Where(value => value.Conformity is not null)];
        if (limited.Count == 0)
        {
            yield break;
        }

        List<string[]> cells = [.. limited.Select(Cells)];
        int[] widths = [.. Enumerable.Range(0, 4).Select(i => cells.Max(row => row[i].Length))];
        for (int i = 0; i < cells.Count; i++)
        {
            string[] row = cells[i];
            string reason = limited[i].Reason is { } why ? $"  {Screen.Printable(why)}" : "";
            yield return
                $"  {row[0].PadRight(widths[0])}  {row[1].PadRight(widths[1])}  {row[2].PadRight(widths[2])}  "
                + $"{row[3].PadRight(widths[3])}  {Word(limited[i].Conformity, palette)}{reason}";
        }
    }

    private static string[] Cells(MeasuredValue value) =>
    [
        value.OperatingPoint, value.Quantity,
        value.Value is { } number
            ? $"{SiText.Format(number, value.Unit)} ± "
                + (value.ExpandedUncertainty is { } expanded ? SiText.Format(expanded, value.Unit, 2) : "unknown")
            : "no value",
        Bounds(value),
    ];

    private static string Bounds(MeasuredValue value) => (value.Lower, value.Upper) switch
    {
        ({ } low, { } high) => $"{SiText.Format(low, value.Unit)} to {SiText.Format(high, value.Unit)}",
        ({ } low, null) => $"at least {SiText.Format(low, value.Unit)}",
        (null, { } high) => $"at most {SiText.Format(high, value.Unit)}",
        _ => "",
    };

    private static string Word(Conformity? conformity, Palette palette) => conformity switch
    {
        Conformity.Conforms => palette.Good("conforms"),
        Conformity.Fails => palette.Bad("FAILS"),
        _ => palette.Open("undecided"),
    };
}
