using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Benchmarks;

/// <summary>What crossings and integrals of four channels of codes cost, beside reading the codes once.</summary>
/// <remarks>Crossings: every one of the middle between the extremes, in each channel. Integrals: ∫ of each channel over
/// the record (charge, flux) and ∫ vds_low · id_low (energy).</remarks>
/// <param name="traces">vgs_low, vds_low, id_low, vds_high of a capture.</param>
internal sealed class CodeKernels(IReadOnlyList<RawTrace> traces)
{
    // Well inside every step of the train, well outside its noise.
    private const double HysteresisPart = 0.02;

    private double _kept;

    /// <summary>The crossings row.</summary>
    public Outcome MeasureCrossings() => Beside(Crossings, $"{CountCrossings()} crossings");

    /// <summary>The integrals row.</summary>
    public Outcome MeasureIntegrals() => Beside(Integrals, "4 charges and 1 energy");

    private Outcome Beside(Rounds.Work ours, string note)
    {
        Rounds.Work floor = Rounds.Here(() =>
        {
            foreach (RawTrace trace in traces)
            {
                _kept += CodeFloor.Sum(trace.Codes);
            }
        });
        Figure[] times = Rounds.Time(ours, floor);
        return new Outcome("s", times[0], Floor: times[1], Note: note);
    }

    private int CountCrossings()
    {
        Crossings(1);
        return (int)_kept;
    }

    /// <summary>The values of the codes are made before the clock starts: the kernels read codes, and look at a value
    /// here and there.</summary>
    private Spent Crossings(int calls)
    {
        Samples gate = SamplesOf(0);
        Samples low = SamplesOf(1);
        Samples current = SamplesOf(2);
        Samples high = SamplesOf(3);
        ((double, double) g, (double, double) l) = (Middle(gate), Middle(low));
        ((double, double) c, (double, double) h) = (Middle(current), Middle(high));
        Meter meter = Meter.Start();
        for (int call = 0; call < calls; call++)
        {
            _kept = Count(gate, g) + Count(low, l) + Count(current, c) + Count(high, h);
            meter.Call();
        }

        return meter.Stop();
    }

    private Spent Integrals(int calls)
    {
        Samples gate = SamplesOf(0);
        Samples low = SamplesOf(1);
        Samples current = SamplesOf(2);
        Samples high = SamplesOf(3);
        double end = gate.Length - 1;
        Meter meter = Meter.Start();
        for (int call = 0; call < calls; call++)
        {
            _kept = Integral.Of(gate, 0, end) + Integral.Of(low, 0, end) + Integral.Of(current, 0, end)
                + Integral.Of(high, 0, end) + Integral.OfProduct(low, current, 0, end);
            meter.Call();
        }

        return meter.Stop();
    }

    private Samples SamplesOf(int at)
    {
        RawTrace trace = traces[at];
        return Samples.Of(trace.Codes, trace.Increment, trace.Origin - (trace.Reference * trace.Increment));
    }

    private static (double Level, double Hysteresis) Middle(Samples samples)
    {
        (double least, double most) = (double.PositiveInfinity, double.NegativeInfinity);
        foreach (double value in samples.Values)
        {
            (least, most) = (Math.Min(least, value), Math.Max(most, value));
        }

        return ((least + most) / 2, HysteresisPart * (most - least));
    }

    private static int Count(Samples samples, (double Level, double Hysteresis) middle)
    {
        int count = 0;
        CrossingScan scan = new(samples, middle.Level, middle.Hysteresis, 0, samples.Length - 1);
        while (scan.Next())
        {
            count++;
        }

        return count;
    }
}
