using System.CommandLine;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Commands;

/// <summary><c>schema</c>: the JSON Schema of a file format, for editors that check while one types.</summary>
internal static class SchemaCommand
{
    public static Command Build()
    {
        var kind = new Argument<string>("kind") { Description = string.Join(", ", SchemaText.Kinds) };
        kind.AcceptOnlyFromAmong([.. SchemaText.Kinds]);
        var command = new Command(
            "schema", "prints the JSON Schema of a file format\n"
                + "Example: benchrunner schema sequence > sequence.schema.json") { kind };
        command.SetAction(parsed =>
        {
            System.Console.WriteLine(SchemaText.Of(parsed.GetRequiredValue(kind)));
            return ExitCode.Done;
        });
        return command;
    }
}
