using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Tolerances;
using BenchRunner.Files;
using BenchRunner.Signals.Comparisons;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Console;

/// <summary>Two waveform files compared, as aligned lines; the last one says inside or outside.</summary>
internal static class CompareText
{
    public static IEnumerable<string> Lines(ComparedFiles compared)
    {
        ComparisonResult result = compared.Result;
        yield return $"measured   {File(compared.Measured)}";
        yield return $"reference  {File(compared.Reference)}";
        yield return $"tolerances {compared.Tolerances.Source.Path} ({compared.Tolerances.Basis})";
        yield return result is { Shift: { } shift, Window: { } window, Headline: { } headline }
            ? $"measured {(shift < 0 ? "earlier" : "later")} by {SiText.Format(Math.Abs(shift), "s", 6)}, where "
                + $"{headline.Name()} correlates best; window {SiText.Format(window.From, "s", 6)} to "
                + $"{SiText.Format(window.To, "s", 6)} of the measured record, {window.Meaning}"
            : $"not aligned: {result.Reason}";
        foreach (string line in Scalars(compared).Concat(Channels(result)))
        {
            yield return line;
        }

        string[] outside = [.. compared.Verdict.Outside.Select(Outside)];
        yield return outside.Length == 0
            ? $"INSIDE the tolerances {compared.Tolerances.Name} ({compared.Tolerances.Basis})"
            : $"OUTSIDE the tolerances {compared.Tolerances.Name} ({compared.Tolerances.Basis}): "
                + string.Join(", ", outside);
    }

    private static string File(ComparedFile file) =>
        $"{file.File}: {file.Waveform.Count} samples at {SiText.Format(file.Waveform.SampleInterval, "s")}, "
            + file.Channels;

    private static IEnumerable<string> Scalars(ComparedFiles compared)
    {
        List<string[]> rows = [["quantity", "definition", "reference", "measured", "error", "within", ""]];
        rows.AddRange(compared.Verdict.Limited.Select(one => Row(
            one.Scalar, SiText.Percent(one.Within), one.IsInside ? "inside" : "OUTSIDE")));
        rows.AddRange(compared.Result.Others.Select(one => Row(one, "", "")));
        return Table(rows).Prepend("quantities (those without a tolerance are no part of the verdict)");
    }

    private static string[] Row(ScalarComparison one, string within, string word) =>
    [
        one.Quantity,
        one.Definition,
        one.Reference is { } reference ? SiText.Format(reference, one.Unit) : "no value",
        one.Measured is { } measured ? SiText.Format(measured, one.Unit) : "no value",
        one.RelativeError is { } error ? SiText.Percent(error) : "none",
        within,
        word.Length > 0 && one.Reason is not null ? $"{word}, not evaluated: {one.Reason}"
            : word + (one.Reason ?? ""),
    ];

    private static IEnumerable<string> Channels(ComparisonResult result)
    {
        List<string[]> rows =
            [["channel", "NRMSE", "magnitude", "phase", "combined", "ADM", "FDM", "GDM", "own shift"]];
        foreach (ChannelComparison one in result.Channels)
        {
            string name = one.Channel.Name() + (one.Channel == result.Headline ? " *" : "");
            rows.Add(one is { Nrmse: { } nrmse, SpragueGeers: { } errors, FeatureSelective: { } features }
                ?
                [
                    name,
                    SiText.Percent(nrmse),
                    SiText.Percent(errors.Magnitude),
                    SiText.Percent(errors.Phase),
                    SiText.Percent(errors.Combined),
                    Measure(features.Amplitude),
                    Measure(features.Feature),
                    Measure(features.Global),
                    one.OwnShift is { } shift ? SiText.Format(shift, "s", 3) : "",
                ]
                : [name, $"none: {one.Reason}"]);
        }

        return Table(rows).Prepend(
            "waveforms over the window (* aligned; NRMSE over the reference's span; Sprague and Geers; "
                + "feature-selective validation)");
    }

    private static string Measure(double value) => $"{SiText.Format(value, "1", 3)} {FeatureSelective.Word(value)}";

    private static string Outside(JudgedScalar one) => one.Scalar.RelativeError is { } error
        ? $"{one.Scalar.Quantity} ({SiText.Percent(error)}, within {SiText.Percent(one.Within)})"
        : $"{one.Scalar.Quantity} (not evaluated: {one.Scalar.Reason})";

    private static IEnumerable<string> Table(List<string[]> rows)
    {
        int[] widths =
        [
            .. Enumerable.Range(0, rows.Max(row => row.Length)).Select(i =>
                rows.Where(row => row.Length > i + 1).Select(row => row[i].Length).DefaultIfEmpty(0).Max()),
        ];
        return rows.Select(row =>
            "  " + string.Join("  ", row.Select((cell, i) => cell.PadRight(widths[i]))).TrimEnd());
    }
}
