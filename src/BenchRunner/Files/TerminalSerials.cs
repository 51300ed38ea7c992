using BenchRunner.Acceptance.Sequences;
using BenchRunner.Console;

namespace BenchRunner.Files;

/// <summary>Serials typed or scanned into the terminal that the person answers at: taken only while one is asked
/// for.</summary>
internal sealed class TerminalSerials(OperatorTerminal terminal, Sequence sequence, Action<string> say) : ISerialReader
{
    public IReadOnlyList<string> Waiting => [];

    public async Task<string?> Next(CancellationToken cancel)
    {
        const string question = "Scan or type the serial of the next device; Ctrl-D ends:";
        while (await terminal.AskSerial(question, cancel) is { } serial)
        {
            if (serial.Length > 0)
            {
                if (SerialForm.Check(serial, sequence, "terminal") is not { } problem)
                {
                    return serial;
                }

                say(problem.ToString());
            }
        }

        return null;
    }
}
