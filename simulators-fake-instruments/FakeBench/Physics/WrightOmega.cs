using System.Runtime.CompilerServices;

namespace FakeBench.Physics;

/// <summary>The Wright omega function of a real number: the w above 0 with w + ln w = z.</summary>
/// <remarks>
/// Lawrence, Corless, Jeffrey: "Algorithm 917: Complex double-precision evaluation of the Wright omega function", ACM
/// Trans. Math. Software 38 (2012), from memory: a start within a few per cent, then one step of Fritsch, Shafer and
/// Crowley, whose error falls with the fourth power. Relative error below 1e-8, as a test holds.
/// </remarks>
public static class WrightOmega
{
    /// <summary>The value at any finite z; 1e-8 of it may be wrong.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static double Of(double z)
    {
        double w = Start(z);
        // Far down w is exp(z) and its logarithm would say nothing new.
        if (z < -20) return w;
        double r = z - w - Math.Log(w);
        double above = 1 + w;
        double mixed = above * (above + 2.0 / 3 * r);
        return w * (1 + r / above * (mixed - 0.5 * r) / (mixed - r));
    }

    private static double Start(double z)
    {
        if (z <= 0)
        {
            // Lambert's function of exp(z), by its Pade approximation at 0.
            double e = Math.Exp(z);
            return e * (1 + 4.0 / 3 * e) / (1 + e * (7.0 / 3 + 5.0 / 6 * e));
        }

        if (z < 3)
        {
            // Taylor's series at z = 1, where w is 1.
            double t = z - 1;
            return 1 + t * (1.0 / 2 + t * (1.0 / 16 - t * (1.0 / 192 + t / 3072)));
        }

        double log = Math.Log(z);
        return z - log + log / z;
    }
}
