namespace BenchRunner.Instruments.Sessions;

/// <summary>The one deadline of an exchange, joined with the caller's token; its source is used again and
/// again.</summary>
internal sealed class Deadline(TimeProvider time) : IDisposable
{
    private CancellationTokenSource? _source;
    private CancellationTokenRegistration _caller;

    /// <summary>Starts the clock.</summary>
    public CancellationToken Start(TimeSpan within, CancellationToken cancel)
    {
        if (_source is null)
        {
            _source = new CancellationTokenSource(within, time);
        }
        else
        {
            _source.CancelAfter(within);
        }

        _caller = cancel.UnsafeRegister(static s => ((CancellationTokenSource)s!).Cancel(), _source);
        return _source.Token;
    }

    /// <summary>Puts the deadline to this time from now: only where the length of what is due has become
    /// known.</summary>
    public void Extend(TimeSpan within) => _source?.CancelAfter(within);

    /// <summary>Stops the clock.</summary>
    public void End()
    {
        _caller.Dispose();
        if (_source is not null && !_source.TryReset())
        {
            Dispose();
        }
    }

    public void Dispose()
    {
        _source?.Dispose();
        _source = null;
    }
}
