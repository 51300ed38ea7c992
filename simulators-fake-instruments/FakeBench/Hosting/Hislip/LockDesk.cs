namespace FakeBench.Hosting.Hislip;

/// <summary>The locks on one instrument: one exclusive holder, or sharers of one name, or both (IVI-6.1, 6.5).</summary>
/// <remarks>A holder is any object; a session is its own. What is not allowed waits.</remarks>
public sealed class LockDesk
{
    private readonly Lock _gate = new();
    private readonly HashSet<object> _sharers = [];
    private object? _exclusive;
    private string _name = "";
    private TaskCompletionSource _changed = New();

    /// <summary>Whether one holder has the instrument for itself.</summary>
    public bool IsExclusive
    {
        get
        {
            lock (_gate)
            {
                return _exclusive is not null;
            }
        }
    }

    /// <summary>How many hold a lock.</summary>
    public int Holders
    {
        get
        {
            lock (_gate)
            {
                return _sharers.Count + (_exclusive is { } holder && !_sharers.Contains(holder) ? 1 : 0);
            }
        }
    }

    /// <summary>Asks for a lock.</summary>
    /// <param name="who">Who asks.</param>
    /// <param name="name">Name of a shared lock; empty: exclusive.</param>
    /// <returns>Whether it is granted now; null: the request makes no sense, since it is held already.</returns>
    public bool? TryTake(object who, string name)
    {
        lock (_gate)
        {
            bool hasBoth = name.Length == 0 ? _exclusive == who : _sharers.Contains(who);
            if (hasBoth)
            {
                return null;
            }

            bool isFree = _exclusive is null || _exclusive == who;
            bool isFit = name.Length == 0
                ? _sharers.Count == 0 || _sharers.Contains(who)
                : _sharers.Count == 0 || _name == name;
            if (!isFree || !isFit)
            {
                return false;
            }

            if (name.Length == 0)
            {
                _exclusive = who;
            }
            else
            {
                _name = name;
                _sharers.Add(who);
            }

            Tell();
            return true;
        }
    }

    /// <summary>Gives back what was taken last: the exclusive lock before the shared one.</summary>
    /// <returns>Whether it was the exclusive one; null: nothing was held.</returns>
    public bool? Release(object who)
    {
        lock (_gate)
        {
            bool wasExclusive = _exclusive == who;
            if (wasExclusive)
            {
                _exclusive = null;
            }
            else if (!_sharers.Remove(who))
            {
                return null;
            }

            Tell();
            return wasExclusive;
        }
    }

    /// <summary>Waits until one may use the instrument.</summary>
    public async Task Admitted(object who, CancellationToken stop)
    {
        while (true)
        {
            Task changed;
            lock (_gate)
            {
                if (_exclusive is not null ? _exclusive == who : _sharers.Count == 0 || _sharers.Contains(who))
                {
                    return;
                }

                changed = _changed.Task;
            }

            await changed.WaitAsync(stop);
        }
    }

    /// <summary>Waits until something was taken or given back.</summary>
    public Task Changed()
    {
        lock (_gate)
        {
            return _changed.Task;
        }
    }

    private static TaskCompletionSource New() => new(TaskCreationOptions.RunContinuationsAsynchronously);

    private void Tell()
    {
        _changed.SetResult();
        _changed = New();
    }
}
