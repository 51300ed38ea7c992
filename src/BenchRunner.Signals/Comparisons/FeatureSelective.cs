using System.Numerics;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Comparisons;

/// <summary>Feature-selective validation: two waveforms compared as an expert's eye would, by envelope and by features.
/// </summary>
/// <param name="Amplitude">Mean amplitude difference measure, ADM, 1.</param>
/// <param name="Feature">Mean feature difference measure, FDM, 1.</param>
/// <param name="Global">Mean global difference measure, GDM, 1: the mean of √(ADM² + FDM²).</param>
/// <remarks>
/// Source: IEEE 1597.1 (weights from memory and public implementations; the anchor below is exact). A copy scaled by s
/// has a mean FDM of (29/18)|s − 1|/(s + 1) and, without slow content, a mean ADM of |s − 1|/(s + 1).
/// </remarks>
public readonly record struct FeatureSelective(double Amplitude, double Feature, double Global)
{
    private const int SlowBins = 5;
    private const int Offset = 5;
    private const int HalfTransition = 3;
    private const double Share = 0.40;

    // Below this part of the whole, a part of the spectrum is rounding and not content.
    private const double Rounding = 1e-12;

    /// <summary>The word that a measure stands for.</summary>
    /// <param name="measure">ADM, FDM or GDM.</param>
    /// <remarks>Source: IEEE 1597.1, the table of its six words (from memory).</remarks>
    public static string Word(double measure) => measure switch
    {
        <= 0.1 => "Excellent",
        <= 0.2 => "Very good",
        <= 0.4 => "Good",
        <= 0.8 => "Fair",
        <= 1.6 => "Poor",
        _ => "Very poor",
    };

    /// <summary>Compares two aligned waveforms.</summary>
    /// <param name="first">One waveform; finite.</param>
    /// <param name="second">The other, on the same grid; finite.</param>
    /// <returns>The measures; null for fewer than 32 samples.</returns>
    /// <exception cref="ArgumentException">The spans differ in length, or a sample is NaN or infinite.</exception>
    /// <remarks>Both spectra are split into slow (the first five bins), low and high parts; the border between low and
    /// high lies five bins above where the lower of the two has 40 % of its content, softened over six bins.</remarks>
    public static FeatureSelective? Form(ReadOnlySpan<double> first, ReadOnlySpan<double> second)
    {
        if (first.Length != second.Length)
        {
            throw new ArgumentException("Compared waveforms have one length.", nameof(second));
        }

        Finite.Require(first, nameof(first));
        Finite.Require(second, nameof(second));
        if (first.Length < 32)
        {
            return null;
        }

        Complex[] a = Spectrum.Of(first);
        Complex[] b = Spectrum.Of(second);
        int border = Math.Min(ShareBin(a), ShareBin(b)) + Offset;
        (double[] slow, double[] low, double[] high) one = Split(a, border);
        (double[] slow, double[] low, double[] high) two = Split(b, border);

        double nothing = Rounding * (Size(first) + Size(second));
        double[] offset = Difference(one.slow, two.slow, 1, nothing);
        double[] amplitude = Difference(one.low, two.low, 1, nothing);
        double[] slope = Difference(Derivative(one.low), Derivative(two.low), 2, nothing);
        double[] edge = Difference(Derivative(one.high), Derivative(two.high), 6, nothing);
        double[] bend = Difference(
            Derivative(Derivative(one.high)), Derivative(Derivative(two.high)), 7.2, nothing);
        double adm = 0;
        double fdm = 0;
        double gdm = 0;
        for (int i = 0; i < first.Length; i++)
        {
            double odm = Math.Abs(offset[i]);
            double am = Math.Abs(amplitude[i]) + (odm * Math.Exp(odm));
            double fm = 2 * Math.Abs(slope[i] + edge[i] + bend[i]);
            adm += am;
            fdm += fm;
            gdm += Math.Sqrt((am * am) + (fm * fm));
        }

        return new FeatureSelective(adm / first.Length, fdm / first.Length, gdm / first.Length);
    }

    /// <summary>The bin below which 40 % of the content above the slow bins lies.</summary>
    private static int ShareBin(Complex[] spectrum)
    {
        double whole = 0;
        for (int i = SlowBins; i <= spectrum.Length / 2; i++)
        {
            whole += spectrum[i].Magnitude;
        }

        double sum = 0;
        for (int i = SlowBins; i <= spectrum.Length / 2; i++)
        {
            sum += spectrum[i].Magnitude;
            if (sum >= Share * whole)
            {
                return i;
            }
        }

        return spectrum.Length / 2;
    }

    private static (double[] Slow, double[] Low, double[] High) Split(Complex[] spectrum, int border)
    {
        int count = spectrum.Length;
        Complex[] slow = new Complex[count];
        Complex[] low = new Complex[count];
        Complex[] high = new Complex[count];
        for (int i = 0; i < count; i++)
        {
            int bin = Math.Min(i, count - i);
            double share = Math.Clamp((border + HalfTransition - bin) / (2.0 * HalfTransition), 0, 1);
            slow[i] = bin < SlowBins ? spectrum[i] : 0;
            low[i] = bin < SlowBins ? 0 : spectrum[i] * share;
            high[i] = bin < SlowBins ? 0 : spectrum[i] * (1 - share);
        }

        return (Spectrum.Back(slow), Spectrum.Back(low), Spectrum.Back(high));
    }

    /// <summary>Central differences, one-sided at the ends.</summary>
    private static double[] Derivative(double[] x)
    {
        double[] slope = new double[x.Length];
        for (int i = 0; i < x.Length; i++)
        {
            int before = Math.Max(0, i - 1);
            int after = Math.Min(x.Length - 1, i + 1);
            slope[i] = (x[after] - x[before]) / (after - before);
        }

        return slope;
    }

    /// <summary>(|x| − |y|) over a weight times the mean of |x| + |y|; 0 where both are nothing.</summary>
    private static double[] Difference(double[] x, double[] y, double weight, double nothing)
    {
        double sum = Size(x) + Size(y);
        double[] difference = new double[x.Length];
        double scale = weight * sum / x.Length;
        for (int i = 0; i < x.Length && sum > nothing; i++)
        {
            difference[i] = (Math.Abs(x[i]) - Math.Abs(y[i])) / scale;
        }

        return difference;
    }

    private static double Size(ReadOnlySpan<double> x)
    {
        double sum = 0;
        foreach (double value in x)
        {
            sum += Math.Abs(value);
        }

        return sum;
    }
}
