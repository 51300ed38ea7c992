using System.Globalization;

namespace BenchRunner.Plots;

/// <summary>An axis: from values to pixels, and where its ticks stand.</summary>
/// <param name="Low">Value at <paramref name="From"/>, SI.</param>
/// <param name="High">Value at <paramref name="To"/>, SI; above <paramref name="Low"/>.</param>
/// <param name="From">Pixel of the low end.</param>
/// <param name="To">Pixel of the high end.</param>
/// <param name="Unit">SI unit.</param>
internal sealed record Axis(double Low, double High, double From, double To, string Unit)
{
    private const int MostTicks = 20;

    /// <summary>Values beyond are drawn at the end: a range of doubles must itself be one.</summary>
    private const double Largest = 1e300;

    private const string Prefixes = "fpnµm kMGT";

    /// <summary>An axis that shows some values with a margin.</summary>
    public static Axis Around(double lowest, double highest, double from, double to, string unit)
    {
        lowest = Math.Clamp(lowest, -Largest, Largest);
        highest = Math.Clamp(highest, -Largest, Largest);
        double margin = highest > lowest ? 0.06 * (highest - lowest) : Math.Max(Math.Abs(highest) / 10, 1e-12);
        return new Axis(lowest - margin, highest + margin, from, to, unit);
    }

    /// <summary>The unit with the prefix in which the ticks are written, e.g. <c>µs</c>.</summary>
    public string ScaledUnit => Group == 0 ? Unit : Prefixes[Group + 5] + Unit;

    private int Group
    {
        get
        {
            double largest = Math.Max(Math.Abs(Low), Math.Abs(High));
            return largest > 0 ? Math.Clamp((int)Math.Floor(Math.Log10(largest) / 3), -5, 4) : 0;
        }
    }

    /// <summary>The pixel of a value; one beyond the axis lies at its end.</summary>
    public double Pixel(double value)
    {
        double part = (Math.Clamp(value, Low, High) - Low) / (High - Low);
        return From + (part * (To - From));
    }

    /// <summary>Round values with their texts, in <see cref="ScaledUnit"/>.</summary>
    /// <param name="wanted">About how many.</param>
    public IEnumerable<(double Value, string Text)> Ticks(int wanted)
    {
        double step = Step((High - Low) / wanted);
        double scale = Math.Pow(10, 3 * Group);
        if (!(step > 0) || !double.IsFinite(step))
        {
            yield break;
        }

        int decimals = Math.Clamp(-(int)Math.Floor(Math.Log10(step / scale) + 1e-9), 0, 12);
        string format = "F" + decimals.ToString(CultureInfo.InvariantCulture);
        double first = Math.Ceiling(Low / step);
        for (int i = 0; i < MostTicks && (first + i) * step <= High; i++)
        {
            double value = (first + i) * step;
            yield return (value, (value / scale).ToString(format, CultureInfo.InvariantCulture));
        }
    }

    /// <summary>The next of 1, 2, 5 times a power of ten.</summary>
    private static double Step(double least)
    {
        double power = Math.Pow(10, Math.Floor(Math.Log10(least)));
        foreach (double digit in (double[])[1, 2, 5])
        {
            if (digit * power >= least)
            {
                return digit * power;
            }
        }

        return 10 * power;
    }
}
