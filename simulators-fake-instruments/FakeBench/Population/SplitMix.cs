namespace FakeBench.Population;

/// <summary>A small counter-based generator: the n-th number is a hash of key and n, so any of them can be had
/// alone.</summary>
/// <remarks>Finaliser of splitmix64 (Steele, Lea, Flood 2014; constants from memory). Not for secrets.</remarks>
public struct SplitMix
{
    private const ulong Golden = 0x9E3779B97F4A7C15;
    private ulong _state;

    /// <summary>Starts the stream of a key.</summary>
    public SplitMix(ulong key) => _state = key;

    /// <summary>Scrambles 64 bits.</summary>
    public static ulong Mix(ulong value)
    {
        value = (value ^ (value >> 30)) * 0xBF58476D1CE4E5B9;
        value = (value ^ (value >> 27)) * 0x94D049BB133111EB;
        return value ^ (value >> 31);
    }

    /// <summary>A key out of a text and numbers; every part counts, and so does their order.</summary>
    public static ulong Key(string text, params ReadOnlySpan<long> numbers)
    {
        ArgumentNullException.ThrowIfNull(text);
        ulong key = Golden;
        foreach (char c in text) key = Mix(key ^ c) + Golden;
        foreach (long number in numbers) key = Mix(key ^ (ulong)number) + Golden;
        return key;
    }

    /// <summary>The next 64 bits.</summary>
    public ulong Next() => Mix(_state += Golden);

    /// <summary>Uniform in (0, 1).</summary>
    public double NextUniform() => ((Next() >> 12) + 0.5) * (1.0 / (1UL << 52));

    /// <summary>Normal with mean 0 and standard deviation 1 (Box and Muller).</summary>
    public double NextNormal()
    {
        double radius = Math.Sqrt(-2 * Math.Log(NextUniform()));
        return radius * Math.Cos(2 * Math.PI * NextUniform());
    }

    /// <summary>Normal, drawn again until it lies within <paramref name="most"/> standard deviations.</summary>
    public double NextNormalWithin(double most)
    {
        double value;
        do value = NextNormal();
        while (Math.Abs(value) > most);
        return value;
    }
}
