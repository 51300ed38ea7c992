using BenchRunner.Acceptance.Files;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>The integration time of a recovered charge: stated by its key or by a definition.</summary>
internal static class IntegrationTimes
{
    /// <summary>The times that a file names, each with its place; the analysis forms one alone.</summary>
    /// <param name="file">The file.</param>
    /// <param name="limits">The limits, which name definitions too; none in a settings file.</param>
    private static IEnumerable<(double Time, Place Where)> In(Fields file, IEnumerable<Fields> limits)
    {
        const string key = "integration-time";
        if (file.Number(key) is { } stated)
        {
            yield return (stated, file.Of(key));
        }

        Fields definitions = file.Block("definitions");
        IEnumerable<(string? Id, Place Where)> named =
        [
            .. definitions.Keys.Select(name => (definitions.Text(name), definitions.Of(name))),
            .. limits.Select(limit => (limit.Text("definition"), limit.Of("definition"))),
        ];
        foreach ((string? id, Place where) in named)
        {
            if (id is not null && DefinitionId.WindowTime(DefinitionId.Split(id).Rule) is { } time)
            {
                yield return (time, where);
            }
        }
    }

    /// <summary>The one time of a file that has no problem, s; null where it names none.</summary>
    public static double? Of(Fields file, IEnumerable<Fields> limits)
    {
        foreach ((double time, Place _) in In(file, limits))
        {
            return time;
        }

        return null;
    }

    /// <summary>Checks that a file names one time at most.</summary>
    public static void Check(Fields file, IEnumerable<Fields> limits, List<Problem> problems)
    {
        double? first = null;
        foreach ((double time, Place where) in In(file, limits))
        {
            first ??= time;
            if (Math.Abs(time - first.Value) > 1e-9 * first.Value)
            {
                problems.Add(new Problem(
                    where,
                    $"an integration time of {SiText.Format(time, "s")} beside {SiText.Format(first.Value, "s")}",
                    "one integration time a file",
                    "use one of them, or a second file"));
            }
        }
    }
}
