using FakeBench.Faults;
using FakeBench.Fixtures;
using FakeBench.Scpi;

namespace FakeBench.Instruments;

/// <summary>The independent voltmeter on the bank's own terminals.</summary>
public sealed class Voltmeter : Instrument
{
    private const double Gain = 1.0002;
    private const double Resolution = 1e-3;

    private double? _stuck;

    /// <summary>Makes a voltmeter.</summary>
    public Voltmeter(Bench bench)
        : base(bench, "voltmeter")
    {
        Scpi.Commands.Ask("MEASure[:SCALar]:VOLTage[:DC]?", _ => Numbers.Nr3(Reading()));
        Scpi.Commands.Ask("READ[:VOLTage][:DC]?", _ => Numbers.Nr3(Reading()));
    }

    /// <inheritdoc/>
    protected override void Reset()
    {
    }

    private double Reading()
    {
        bool isOpen = Bench.Faults.Has(FaultCatalogue.VoltmeterOpen) || Bench.Faults.Has(FaultCatalogue.FuseOpens);
        double shown = isOpen ? 0 : Math.Round(Bench.BankVoltage * Gain / Resolution) * Resolution;
        if (!Bench.Faults.Has(FaultCatalogue.ReadingSticks))
        {
            return shown;
        }

        return _stuck ??= shown;
    }
}
