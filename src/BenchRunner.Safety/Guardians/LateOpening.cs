namespace BenchRunner.Safety.Guardians;

/// <summary>A link that is opened when it is first needed, once for all who need it; again where that failed.</summary>
internal sealed class LateOpening<T>(Func<CancellationToken, Task<T>> open) : IDisposable
    where T : class
{
    private readonly Lock _gate = new();
    private Task<T>? _opening;

    public bool IsOpen => _opening is { IsCompletedSuccessfully: true };

    /// <summary>Waits for it. Who no longer waits does not end the opening, which has bounds of its own.</summary>
    public Task<T> Get(CancellationToken cancel)
    {
        lock (_gate)
        {
            if (_opening is null or { IsFaulted: true } or { IsCanceled: true })
            {
                _opening = open(CancellationToken.None);
            }

            return _opening.WaitAsync(cancel);
        }
    }

    public void Dispose()
    {
        if (IsOpen)
        {
            (_opening!.Result as IDisposable)?.Dispose();
        }
    }
}
