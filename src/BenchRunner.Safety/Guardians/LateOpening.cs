namespace BenchRunner.Safety.Guardians;

/// <summary>A link that is opened when it is first needed, once for all who need it; again where that failed.</summary>
internal sealed class LateOpening<T>(Func<CancellationToken, Task<T>> open) : IAsyncDisposable
    where T : class
{
    private readonly Lock _gate = new();
    private readonly CancellationTokenSource _end = new();
    private Task<T>? _opening;
    private bool _isOver;

    public bool IsOpen => _opening is { IsCompletedSuccessfully: true };

    /// <summary>Waits for it. Who no longer waits does not end the opening, which has bounds of its own.</summary>
    public Task<T> Get(CancellationToken cancel)
    {
        lock (_gate)
        {
            if (_opening is null or { IsFaulted: true } or { IsCanceled: true })
            {
                _opening = open(_end.Token);
            }

            return _opening.WaitAsync(cancel);
        }
    }

    /// <summary>Gives up an opening that is under way: a link that came after its owner had gone would be nobody's.</summary>
    public async ValueTask DisposeAsync()
    {
        lock (_gate)
        {
            if (_isOver)
            {
                return;
            }

            _isOver = true;
        }

        _end.Cancel();
        if (_opening is { } opening)
        {
            await ((Task)opening).ConfigureAwait(
                ConfigureAwaitOptions.SuppressThrowing | ConfigureAwaitOptions.ContinueOnCapturedContext);
            (IsOpen ? opening.Result as IDisposable : null)?.Dispose();
        }

        _end.Dispose();
    }
}
