using System.Collections.Concurrent;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Commands that set down and are not known to have been obeyed: a device clear may have dropped them. From any
/// thread.</summary>
internal sealed class Unconfirmed
{
    private readonly ConcurrentQueue<string> _commands = new();

    /// <summary>How many there are.</summary>
    public int Count => _commands.Count;

    /// <summary>Adds one, before it is sent.</summary>
    public void Add(string command) => _commands.Enqueue(command);

    /// <summary>They, in the order sent.</summary>
    public string[] ToArray() => _commands.ToArray();

    /// <summary>Takes note that the oldest ones were obeyed.</summary>
    /// <param name="count">How many.</param>
    public void Confirm(int count)
    {
        while (count-- > 0)
        {
            _commands.TryDequeue(out _);
        }
    }
}
