using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Dialects;

/// <summary>The keys of a dialect's <c>wire:</c> block, what they mean together, and the habits that they say.</summary>
internal static class WireKeys
{
    private const string None = "none";
    private const string Reopen = "reopen";

    /// <summary>A question, or the word none: what a command of a dialect may hold, and nothing else.</summary>
    private const string QueryOrNone = @"none|[!-:<-~][ -:<-~]*\?";

    /// <summary>Text before a block: printable, and without the <c>#</c> that begins one.</summary>
    private const string Before = "[!-\"$-~][ -\"$-~]{0,31}";

    /// <summary>The block.</summary>
    public static BlockShape Block { get; } = new(
        "What the instrument does otherwise on the wire than the standard says.",
        [
            Key.Optional("terminator", new WordShape("What ends a message, both ways.", ["NL", "CR NL", "CR"])),
            Key.Optional("error-query", new TextShape(
                "The question for the oldest entry of its error queue.", "'SYSTem:ERRor:NEXT?'", QueryOrNone,
                "a question without a semicolon, or none")),
            Key.Optional("operation-complete", new FlagShape(
                "Whether it knows *OPC?, which is asked after a setting where there is no error queue.")),
            Key.Optional("recovery", new WordShape(
                "How a link in doubt is made sure of: by a number in *ESE, or by opening it again.",
                ["sentinel", Reopen])),
            Key.Optional("echo", new FlagShape("Whether it sends back each message before it answers.")),
            Key.Optional("block-before", new TextShape(
                "What it writes before the # of a block.", "'TRACE '", Before,
                "1 to 32 printable characters without #")),
            Key.Optional("block-end", new WordShape(
                "What follows the last byte of a block.", ["terminator", None])),
            Key.Optional("numbered", new FlagShape(
                "Whether voltmeter and interlock are asked with a number that the reply must bring back, and with the "
                    + "power-on bit of *ESR?.")),
        ],
        AtLeast: 1);

    /// <summary>What contradicts itself.</summary>
    public static void Check(Fields file, List<Problem> problems)
    {
        Fields wire = file.Block("wire");
        if (wire.Flag("numbered") != true)
        {
            return;
        }

        if (wire.Text("recovery") == Reopen)
        {
            problems.Add(new Problem(
                wire.Of("numbered"), "numbered is true where recovery is reopen",
                "an instrument that knows *ESE for both, or for neither", "remove one of the two"));
        }

        if (file.Text("role") is { } role && role is not ("voltmeter" or "interlock"))
        {
            problems.Add(new Problem(
                wire.Of("numbered"), $"numbered is true in a dialect of the role {role}",
                "the role voltmeter or interlock, whose readings safety rests on", "remove it"));
        }
    }

    /// <summary>The habits that a file says.</summary>
    public static WireHabits Of(Fields wire)
    {
        string? errors = wire.Text("error-query") ?? WireHabits.StandardErrorQuery;
        return new WireHabits(
            wire.Text("terminator") ?? WireHabits.Standard.Terminator,
            errors == None ? null : errors,
            wire.Flag("operation-complete") ?? true,
            wire.Text("recovery") == Reopen,
            wire.Flag("echo") ?? false,
            wire.Text("block-before") ?? "",
            wire.Text("block-end") != None,
            wire.Flag("numbered") ?? false);
    }
}
