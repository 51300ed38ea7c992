namespace FakeBench.Scpi;

/// <summary>The error queue: first in, first out; when it overflows, its newest place becomes −350.</summary>
/// <remarks>Source: SCPI-1999 volume 2, 21.8.</remarks>
public sealed class ErrorList
{
    /// <summary>Places in the queue.</summary>
    public const int Capacity = 16;

    private const int LongestText = 255;
    private readonly List<string> _entries = [];

    /// <summary>Entries waiting.</summary>
    public int Count => _entries.Count;

    /// <summary>Puts an error at the end.</summary>
    /// <returns>The numbers that took effect: the error itself, and −350 where the queue overflowed by it.</returns>
    public IReadOnlyList<int> Add(int number, string? detail)
    {
        if (_entries.Count < Capacity)
        {
            _entries.Add(Format(number, detail));
            return [number];
        }

        _entries[^1] = Format(-350, null);
        return [number, -350];
    }

    /// <summary>Takes the oldest entry out.</summary>
    public string Next()
    {
        if (_entries.Count == 0)
        {
            return Format(0, null);
        }

        string oldest = _entries[0];
        _entries.RemoveAt(0);
        return oldest;
    }

    /// <summary>Empties the queue.</summary>
    public void Clear() => _entries.Clear();

    private static string Format(int number, string? detail)
    {
        string text = StandardErrors.Text(number);
        if (detail is not null)
        {
            text = $"{text};{detail}";
        }

        text = text.Length > LongestText ? text[..LongestText] : text;
        return $"{Numbers.Nr1(number)},{Numbers.Quoted(text)}";
    }
}
