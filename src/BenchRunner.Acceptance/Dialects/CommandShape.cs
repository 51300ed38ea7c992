using System.Text.Json.Nodes;
using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Dialects;

/// <summary>The command of one operation: one line of printable ASCII, one command, with its placeholders.</summary>
/// <param name="Operation">The operation.</param>
internal sealed partial record CommandShape(RoleOperation Operation) : Shape("")
{
    private const string Value = "{value}";
    private const string Channel = "{channel}";

    /// <inheritdoc/>
    public override string Expected => "one command of printable ASCII and no semicolon";

    /// <inheritdoc/>
    public override string Example => $"'SUBSystem:COMMand{(Operation.IsQuery ? "?" : "")}"
        + $"{(Operation.TakesValue ? " " + Value : "")}{(Operation.TakesChannel ? " " + Channel : "")}'";

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        // A line feed or ';' would send a second command that nobody waits for and no permit covers.
        if (node is not YamlScalar { Text.Length: > 0 and <= TextShape.Longest } scalar
            || scalar.Text.Contains(';')
            || scalar.Text.Any(c => c is < ' ' or > '~')
            || scalar.Text.Trim().Length != scalar.Text.Length)
        {
            Refuse(node, label, problems);
            return null;
        }

        int before = problems.Count;
        Placeholder(scalar, label, Value, Operation.TakesValue, problems);
        Placeholder(scalar, label, Channel, Operation.TakesChannel, problems);
        foreach (Match other in Braces().Matches(scalar.Text))
        {
            if (other.Value is not (Value or Channel))
            {
                problems.Add(new Problem(
                    node.Where,
                    $"{label} has {Shown.Quote(other.Value)}",
                    $"no braces but {Value} and {Channel}",
                    "correct it"));
            }
        }

        if (scalar.Text.Contains('?') != Operation.IsQuery)
        {
            problems.Add(new Problem(
                node.Where,
                $"{label} is {Shown.Quote(scalar.Text)}",
                Operation.IsQuery
                    ? "a query, with a question mark"
                    : "a command that answers nothing, without a question mark",
                Operation.IsQuery ? "add the question mark" : "remove the question mark"));
        }

        return problems.Count == before ? scalar.Text : null;
    }

    /// <inheritdoc/>
    public override JsonObject Schema()
    {
        string query = Operation.IsQuery ? @"(?=.*\?)" : @"(?!.*\?)";
        string value = Operation.TakesValue ? @"(?=.*\{value\})" : @"(?!.*\{value\})";
        string channel = Operation.TakesChannel ? @"(?=.*\{channel\})" : @"(?!.*\{channel\})";
        return new JsonObject
        {
            ["type"] = "string",
            ["maxLength"] = TextShape.Longest,
            ["pattern"] = $"^{query}{value}{channel}[!-:<-~]([ -:<-~]*[!-:<-~])?$",
        };
    }

    [GeneratedRegex(@"\{[^}]*\}?|\}")]
    private static partial Regex Braces();

    private static void Placeholder(
        YamlScalar node, string label, string placeholder, bool isWanted, List<Problem> problems)
    {
        int count = Regex.Count(node.Text, Regex.Escape(placeholder));
        if (count == (isWanted ? 1 : 0))
        {
            return;
        }

        problems.Add(new Problem(
            node.Where,
            $"{label} has {placeholder} {(count == 1 ? "once" : $"{count} times")}",
            isWanted ? $"{placeholder} once" : $"no {placeholder}, as there is none to put in",
            isWanted ? $"write {placeholder} where it belongs" : "remove it"));
    }
}
