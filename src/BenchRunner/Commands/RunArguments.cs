using BenchRunner.Console;

namespace BenchRunner.Commands;

/// <summary>What the command line of <c>run</c> says.</summary>
internal sealed record RunArguments(
    string Sequence,
    IReadOnlyList<string> Devices,
    string? Lot,
    string? Bench,
    string? Evidence,
    string? Operator,
    string? ArmedBy,
    string? Companion,
    string? Again,
    bool Json)
{
    /// <summary>What a real bench asks for beyond a simulated one.</summary>
    /// <exception cref="InputException">It is missing; nothing was touched.</exception>
    public void Check(bool fake)
    {
        if (fake)
        {
            return;
        }

        if (string.IsNullOrWhiteSpace(Operator))
        {
            throw new InputException(
                "this bench is not started by the program: say who operates it with --operator NAME");
        }

        if (ArmedBy is null && !OperatorConfirmation.CanAsk)
        {
            throw new InputException(
                "there is no terminal to confirm at, and no --armed-by NAME says who confirmed at the bench; nothing "
                    + "was energised");
        }
    }
}
