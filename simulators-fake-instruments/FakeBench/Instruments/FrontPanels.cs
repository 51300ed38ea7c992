using FakeBench.Fixtures;

namespace FakeBench.Instruments;

/// <summary>The instruments of a bench.</summary>
public sealed class FrontPanels
{
    /// <summary>Makes them.</summary>
    /// <param name="bench">What they share.</param>
    /// <param name="channels">Channels on the scope's inputs 1, 2, …</param>
    /// <param name="bits">Bits of the scope's converter, 8 or 12.</param>
    /// <param name="trains">Where trains are computed; null: a place of their own.</param>
    public FrontPanels(Bench bench, IReadOnlyList<string> channels, int bits, TrainCache? trains = null)
    {
        ArgumentNullException.ThrowIfNull(bench);
        Supply = new Supply(bench);
        Scope = new Scope(bench, channels, bits);
        Pulser = new Pulser(bench, Scope, trains ?? new TrainCache());
        Voltmeter = new Voltmeter(bench);
        Interlock = new Interlock(bench);
        Hotplate = bench.Plate is { } plate ? new Hotplate(bench, plate) : null;
    }

    /// <summary>All of them.</summary>
    public IReadOnlyList<Instrument> All =>
        [Supply, Pulser, Scope, Voltmeter, Interlock, .. Hotplate is { } plate ? (Instrument[])[plate] : []];

    /// <summary>The supply.</summary>
    public Supply Supply { get; }

    /// <summary>The pulser.</summary>
    public Pulser Pulser { get; }

    /// <summary>The scope.</summary>
    public Scope Scope { get; }

    /// <summary>The voltmeter.</summary>
    public Voltmeter Voltmeter { get; }

    /// <summary>The interlock controller.</summary>
    public Interlock Interlock { get; }

    /// <summary>The hotplate; null: the bench has none.</summary>
    public Hotplate? Hotplate { get; }
}
