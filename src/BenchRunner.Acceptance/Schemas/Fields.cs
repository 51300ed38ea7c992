using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>The sound values of a block by their keys; what was missing or wrong is not in it.</summary>
/// <param name="where">Where the block stands.</param>
internal sealed class Fields(Place where)
{
    private readonly Dictionary<string, (Place At, Item Value)> _values = new(StringComparer.Ordinal);
    private readonly Dictionary<string, Place> _written = new(StringComparer.Ordinal);

    /// <summary>Where the block stands.</summary>
    public Place Where { get; } = where;

    /// <summary>The keys with a sound value, as written.</summary>
    public IEnumerable<string> Keys => _values.Keys;

    /// <summary>Notes that a key was written, sound or not.</summary>
    public void Note(string key, Place at) => _written[key] = at;

    /// <summary>Adds a sound value.</summary>
    public void Add(string key, Place at, Item value) => _values[key] = (at, value);

    /// <summary>Whether a key was written, with a sound value or not.</summary>
    public bool IsWritten(string key) => _written.ContainsKey(key);

    /// <summary>Place of a key's value; of the block where there is none.</summary>
    public Place Of(string key) => _values.TryGetValue(key, out var found) ? found.Value.Where : KeyOf(key);

    /// <summary>Place of a key; of the block where it was not written.</summary>
    public Place KeyOf(string key) => _written.GetValueOrDefault(key, Where);

    /// <summary>A number in SI.</summary>
    public double? Number(string key) => Content(key) as double?;

    /// <summary>A number in SI that is required, so that it is there once the block has no problem.</summary>
    public double Need(string key) => (double)Content(key)!;

    /// <summary>A whole number.</summary>
    public int? Whole(string key) => Content(key) as int?;

    /// <summary>A yes or no.</summary>
    public bool? Flag(string key) => Content(key) as bool?;

    /// <summary>A text or word.</summary>
    public string? Text(string key) => Content(key) as string;

    /// <summary>A pair of numbers, the lower first.</summary>
    public (double Low, double High)? Pair(string key) => Content(key) as (double, double)?;

    /// <summary>A block; an empty one where there is none.</summary>
    public Fields Block(string key) => Content(key) as Fields ?? new Fields(KeyOf(key));

    /// <summary>The sound items of a list; none where there is no list.</summary>
    public IReadOnlyList<Item> Items(string key) => Content(key) as IReadOnlyList<Item> ?? [];

    /// <summary>The sound blocks of a list; none where there is no list.</summary>
    public IReadOnlyList<Fields> Blocks(string key) => [.. Items(key).Select(item => item.Content).OfType<Fields>()];

    /// <summary>The points of a thermal impedance; none where it is not stated.</summary>
    public IReadOnlyList<ThermalPoint> Thermal(string key) => Content(key) as IReadOnlyList<ThermalPoint> ?? [];

    /// <summary>The places of all values below, by path (<c>gate.on</c>).</summary>
    public IReadOnlyDictionary<string, Place> Places()
    {
        var places = new Dictionary<string, Place>(StringComparer.Ordinal);
        Collect("", places);
        return places;
    }

    private void Collect(string path, Dictionary<string, Place> places)
    {
        foreach ((string key, (Place _, Item value)) in _values)
        {
            places[path + key] = value.Where;
            (value.Content as Fields)?.Collect(path + key + ".", places);
        }
    }

    private object? Content(string key) => _values.TryGetValue(key, out var found) ? found.Value.Content : null;
}

/// <summary>A sound value and its place.</summary>
/// <param name="Content">The value.</param>
/// <param name="Where">Where it stands.</param>
internal readonly record struct Item(object Content, Place Where);
