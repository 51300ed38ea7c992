using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Files;

/// <summary>Serials of the command line, or of standard input where <c>-</c> is given: a bar-code reader types
/// them.</summary>
/// <remarks>A serial of a wrong form on the command line ends everything before it begins; from a reader it is said and
/// skipped.</remarks>
internal sealed class Serials : IDeviceSource
{
    private readonly Queue<string> _waiting;
    private readonly Sequence _sequence;
    private readonly bool _fromInput;
    private readonly Action<string> _complain;
    private int _line;

    /// <summary>Takes what the command line says.</summary>
    /// <exception cref="InputException">A serial has a wrong form, or <c>-</c> stands beside serials.</exception>
    public Serials(IReadOnlyList<string> given, Sequence sequence, Action<string> complain)
    {
        _sequence = sequence;
        _complain = complain;
        _fromInput = given.Contains("-");
        if (_fromInput && given.Count > 1)
        {
            throw new InputException("--device - reads serials from standard input; give no other --device beside it");
        }

        _waiting = _fromInput ? [] : new Queue<string>(given);
        string[] wrong =
            [.. _waiting.Select(serial => Check(serial, "--device")).OfType<Problem>().Select(p => p.ToString())];
        if (wrong.Length > 0)
        {
            throw new InputException(string.Join(Environment.NewLine, wrong));
        }
    }

    public IReadOnlyList<string> Waiting => [.. _waiting];

    public async Task<string?> Next(CancellationToken cancel)
    {
        if (!_fromInput)
        {
            return _waiting.TryDequeue(out string? next) ? next : null;
        }

        // The console's own reader would block a cancelled run until the next scan.
        while (await Task.Run(System.Console.In.ReadLine, CancellationToken.None).WaitAsync(cancel) is { } typed)
        {
            _line++;
            string serial = typed.Trim();
            if (serial.Length == 0)
            {
                continue;
            }

            if (Check(serial, $"standard input:{_line}") is not { } problem)
            {
                return serial;
            }

            _complain(problem.ToString());
        }

        return null;
    }

    private Problem? Check(string serial, string source) => SerialForm.Check(serial, _sequence, source);
}
