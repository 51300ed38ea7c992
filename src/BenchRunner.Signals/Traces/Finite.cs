using System.Numerics;
using System.Runtime.InteropServices;

namespace BenchRunner.Signals.Traces;

/// <summary>Kernels take finite samples and refuse others: a NaN would pass every comparison unseen.</summary>
/// <remarks>The analysis bridges clipped samples before any kernel meets one, and turns them into reasons.</remarks>
internal static class Finite
{
    /// <summary>Whether all samples are finite: x · 0 is 0, or NaN from the first infinity or NaN on.</summary>
    public static bool All(ReadOnlySpan<double> samples)
    {
        ReadOnlySpan<Vector<double>> wide = MemoryMarshal.Cast<double, Vector<double>>(samples);
        Vector<double> sums = Vector<double>.Zero;
        foreach (Vector<double> x in wide)
        {
            sums += x * Vector<double>.Zero;
        }

        double sum = Vector.Sum(sums);
        foreach (double x in samples[(wide.Length * Vector<double>.Count)..])
        {
            sum += x * 0;
        }

        return sum == 0;
    }

    /// <summary>Refuses samples of which one is not finite.</summary>
    /// <exception cref="ArgumentException">A sample is NaN or infinite.</exception>
    public static void Require(ReadOnlySpan<double> samples, string name)
    {
        if (!All(samples))
        {
            throw Refusal(name);
        }
    }

    /// <summary>Refuses a stretch of which a sample is not finite; codes always are.</summary>
    /// <param name="samples">The signal.</param>
    /// <param name="from">First sample looked at.</param>
    /// <param name="last">Last sample looked at.</param>
    /// <param name="name">Name of the argument.</param>
    /// <exception cref="ArgumentException">A sample is NaN or infinite.</exception>
    public static void Require(Samples samples, int from, int last, string name)
    {
        if (!samples.HasCodes)
        {
            Require(samples.Values[from..(last + 1)], name);
        }
    }

    /// <summary>Refuses a sample that is not finite.</summary>
    /// <exception cref="ArgumentException">The sample is NaN or infinite.</exception>
    public static void Require(double sample, string name)
    {
        if (!double.IsFinite(sample))
        {
            throw Refusal(name);
        }
    }

    /// <summary>Refuses a result that is not finite because a sample is not; sums of finite samples may
    /// overflow.</summary>
    /// <param name="result">What was formed of the samples.</param>
    /// <param name="samples">The samples.</param>
    /// <param name="from">First position that went into it, in samples; inside the span.</param>
    /// <param name="to">Last position.</param>
    /// <param name="name">Name of the argument.</param>
    /// <exception cref="ArgumentException">A sample is NaN or infinite.</exception>
    public static void Require(double result, Samples samples, double from, double to, string name)
    {
        if (!double.IsFinite(result))
        {
            Require(samples, (int)from, (int)Math.Ceiling(to), name);
        }
    }

    private static ArgumentException Refusal(string name) => new("A sample is not finite.", name);
}
