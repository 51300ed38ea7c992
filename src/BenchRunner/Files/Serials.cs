using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Files;

/// <summary>Serials of the command line, or of a bar-code reader where <c>-</c> is given.</summary>
/// <remarks>A serial of a wrong form on the command line ends everything before it begins; from a reader it is said and
/// skipped.</remarks>
internal sealed class Serials : IDeviceSource
{
    private readonly Queue<string> _given;
    private readonly ISerialReader? _reader;

    /// <summary>Takes what the command line says.</summary>
    /// <exception cref="InputException">A serial has a wrong form or stands twice, or <c>-</c> stands beside
    /// serials.</exception>
    public Serials(IReadOnlyList<string> given, Sequence sequence, Func<ISerialReader> reader)
    {
        bool fromReader = given.Contains("-");
        if (fromReader && given.Count > 1)
        {
            throw new InputException("--device - reads serials from standard input; give no other --device beside it");
        }

        _given = fromReader ? [] : new Queue<string>(given);
        string[] wrong =
        [
            .. given.Distinct().Where(serial => !fromReader && given.Count(other => other == serial) > 1)
                .Select(serial => $"--device: {serial} is given more than once; each device is run once a call"),
            .. _given.Select(serial => SerialForm.Check(serial, sequence, "--device")).OfType<Problem>()
                .Select(problem => problem.ToString()),
        ];
        if (wrong.Length > 0)
        {
            throw new InputException(string.Join(Environment.NewLine, wrong));
        }

        _reader = fromReader ? reader() : null;
    }

    public bool FromReader => _reader is not null;

    public IReadOnlyList<string> Waiting => _reader?.Waiting ?? [.. _given];

    public Task<string?> Next(CancellationToken cancel) =>
        _reader?.Next(cancel) ?? Task.FromResult(_given.TryDequeue(out string? next) ? next : null);
}
