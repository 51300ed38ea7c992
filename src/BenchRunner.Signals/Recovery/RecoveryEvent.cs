using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Peaks;
using BenchRunner.Signals.Switching;

namespace BenchRunner.Signals.Recovery;

/// <summary>The recovery of the freewheeling diode at turn-on: its current with peak and zero crossing.</summary>
/// <remarks>
/// irr is positive in the reverse direction: id_high where that is measured, id_low − iL(t) otherwise; the two differ
/// by the current of the load's winding capacitance. Of a fast device, irr is largely the charging of its output
/// capacitance.
/// </remarks>
public readonly ref struct RecoveryEvent
{
    private const double HysteresisPart = 0.01;

    /// <summary>Finds peak and zero crossing.</summary>
    /// <param name="irr">Recovery current, A, uniform, reverse positive, finite.</param>
    /// <param name="dt">Sample interval, s; above 0.</param>
    /// <param name="departure">Departure of on2, in samples: nothing is looked for before it.</param>
    /// <param name="peakEnd">Where the search for the peak ends, in samples.</param>
    /// <param name="sigma">Noise of irr (σ), A.</param>
    /// <param name="step">Smallest step of its record (LSB), A.</param>
    public RecoveryEvent(
        ReadOnlySpan<double> irr, double dt, double departure, double peakEnd, double sigma, double step)
    {
        Irr = irr;
        SampleInterval = dt;
        Departure = departure;
        PeakEnd = peakEnd;
        Sigma = sigma;
        Step = step;
        Start = Instant.None("no recovery peak");
        if (Peak.Raw(irr, departure, peakEnd) is not { } peak)
        {
            Reason = "no recovery peak inside the window";
            return;
        }

        Top = peak;
        if (!(peak.Height > 3 * sigma) || !(peak.Height > 0))
        {
            Reason = "the recovery peak is within the noise";
            return;
        }

        Start = Crossing.First(irr, 0, Hysteresis, CrossingDirection.Rising, departure, peak.Position) is { } at
            ? Instant.Of(at)
            : Instant.None("irr does not cross zero before its peak");
    }

    /// <summary>Recovery current, A.</summary>
    public ReadOnlySpan<double> Irr { get; }

    /// <summary>Sample interval, s.</summary>
    public double SampleInterval { get; }

    /// <summary>Departure of on2, in samples.</summary>
    public double Departure { get; }

    /// <summary>Where the search for the peak ended, in samples.</summary>
    public double PeakEnd { get; }

    /// <summary>Noise of irr (σ), A.</summary>
    public double Sigma { get; }

    /// <summary>Smallest step of the record of irr (LSB), A.</summary>
    public double Step { get; }

    /// <summary>The recovery peak irm; meaningful where <see cref="Reason"/> is null.</summary>
    public Peak Top { get; }

    /// <summary>Why there is no peak; null where there is one.</summary>
    public string? Reason { get; }

    /// <summary>t0: where irr crosses zero upwards.</summary>
    public Instant Start { get; }

    /// <summary>Hysteresis of crossings of irr: max(3 σ, 1 % of irm), A.</summary>
    public double Hysteresis => Math.Max(3 * Sigma, HysteresisPart * Top.Height);

    /// <summary>When irr, after its peak, falls through a fraction of it.</summary>
    /// <param name="fraction">The fraction, 0 to 1.</param>
    public Instant Fall(double fraction)
    {
        if (Reason is not null)
        {
            return Instant.None(Reason);
        }

        double level = fraction * Top.Height;
        if (level <= Hysteresis)
        {
            return Instant.None("level within the noise");
        }

        return Crossing.First(
            Irr, level, Hysteresis, CrossingDirection.Falling, Top.Sample, Irr.Length - 1) is { } at
            ? Instant.Of(at)
            : Instant.None("the window ends before irr has fallen far enough");
    }
}
