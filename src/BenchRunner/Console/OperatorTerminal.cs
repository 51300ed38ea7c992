namespace BenchRunner.Console;

/// <summary>The one owner of the terminal. A bar-code reader may type into it as the person does, so what a line is
/// depends on what is asked for: a serial, an answer, or nothing.</summary>
/// <remarks>
/// Every line is taken at once, and under the lock under which questions begin and end: a line that came while nothing
/// was asked for is said and not used, and can never meet a later question. Nothing is read before the first question.
/// </remarks>
internal sealed class OperatorTerminal(Screen screen, TimeProvider time) : IAsyncDisposable
{
    private static readonly TimeSpan LookEvery = TimeSpan.FromMilliseconds(20);
    private readonly Lock _gate = new();
    private readonly CancellationTokenSource _end = new();
    private Terminal? _terminal;
    private TaskCompletionSource<string?>? _asked;
    private Task _taking = Task.CompletedTask;
    private bool _isGone;

    /// <summary>Whether there is a person who can be asked.</summary>
    public static bool Exists
    {
        get
        {
            using Terminal? terminal = Terminal.Open();
            return terminal is not null;
        }
    }

    /// <summary>Asks the person. What was typed or scanned before the question is thrown away.</summary>
    /// <returns>The line; null where the person has left or there is no terminal.</returns>
    /// <exception cref="IOException">What waited cannot be thrown away.</exception>
    public Task<string?> Ask(string question, CancellationToken cancel) => Ask(question, discards: true, cancel);

    /// <summary>Asks for a serial, typed or scanned. A line that was typed before counts: it arms nothing.</summary>
    /// <returns>The line; null where the person has left or there is no terminal.</returns>
    public Task<string?> AskSerial(string question, CancellationToken cancel) => Ask(question, discards: false, cancel);

    /// <summary>Stops reading.</summary>
    public async ValueTask DisposeAsync()
    {
        await _end.CancelAsync();
        await _taking;
        _terminal?.Dispose();
        _end.Dispose();
    }

    private async Task<string?> Ask(string question, bool discards, CancellationToken cancel)
    {
        await screen.Written(cancel);
        var asked = new TaskCompletionSource<string?>(TaskCreationOptions.RunContinuationsAsynchronously);
        Terminal? terminal = Begin(asked, discards);
        if (terminal is null)
        {
            return null;
        }

        try
        {
            terminal.Write(question);
            return await asked.Task.WaitAsync(cancel);
        }
        finally
        {
            lock (_gate)
            {
                _asked = null;
            }
        }
    }

    private Terminal? Begin(TaskCompletionSource<string?> asked, bool discards)
    {
        lock (_gate)
        {
            _terminal ??= Terminal.Open();
            if (_isGone || _terminal is not { } terminal)
            {
                return null;
            }

            if (discards)
            {
                terminal.DiscardWaiting();
            }

            _asked = asked;
            if (_taking == Task.CompletedTask)
            {
                _taking = Take(terminal);
            }

            return terminal;
        }
    }

    private async Task Take(Terminal terminal)
    {
        using var timer = new PeriodicTimer(LookEvery, time);
        try
        {
            while (!_isGone && await timer.WaitForNextTickAsync(_end.Token))
            {
                TakeAll(terminal);
            }
        }
        catch (OperationCanceledException)
        {
            // The program ends.
        }
    }

    private void TakeAll(Terminal terminal)
    {
        lock (_gate)
        {
            try
            {
                while (terminal.TryTake(out string? line))
                {
                    Give(line);
                    if (line is null)
                    {
                        return;
                    }
                }
            }
            catch (IOException)
            {
                _isGone = true;
                _asked?.TrySetResult(null);
            }
        }
    }

    private void Give(string? line)
    {
        if (_asked is { } asked)
        {
            _asked = null;
            asked.TrySetResult(line);
        }
        else if (!string.IsNullOrEmpty(line))
        {
            screen.Line(screen.Palette.Open(
                $"  '{Screen.Printable(line)}' came while nothing was asked for: it is not used; scan or type it again "
                    + "when it is asked for"));
        }
    }
}
