using FakeBench.Population;

namespace FakeBench.Probes;

/// <summary>White Gaussian noise at about a nanosecond a sample.</summary>
/// <remarks>Each sample is a hashed entry of a table of 65,536 normal values (Box and Muller over an even net of radii
/// and
/// angles), four entries from one 64-bit number. No value lies beyond 4.8 standard deviations.</remarks>
public static class GaussianNoise
{
    private const int Pairs = 32768;
    private static readonly double[] Table = Build();

    /// <summary>Adds noise.</summary>
    /// <param name="samples">Changed in place.</param>
    /// <param name="deviation">Root mean square, in the samples' unit.</param>
    /// <param name="key">Equal keys, equal noise.</param>
    public static void Add(Span<double> samples, double deviation, ulong key)
    {
        if (deviation == 0) return;
        var source = new SplitMix(key);
        double[] table = Table;
        int i = 0;
        while (i < samples.Length)
        {
            ulong bits = source.Next();
            int end = Math.Min(i + 4, samples.Length);
            for (; i < end; i++)
            {
                samples[i] += deviation * table[(ushort)bits];
                bits >>= 16;
            }
        }
    }

    private static double[] Build()
    {
        const double goldenAngle = 0.6180339887498949;
        var table = new double[2 * Pairs];
        for (int i = 0; i < Pairs; i++)
        {
            double radius = Math.Sqrt(-2 * Math.Log((i + 0.5) / Pairs));
            double turn = i * goldenAngle;
            double angle = 2 * Math.PI * (turn - Math.Floor(turn));
            table[2 * i] = radius * Math.Cos(angle);
            table[2 * i + 1] = radius * Math.Sin(angle);
        }

        return table;
    }
}
