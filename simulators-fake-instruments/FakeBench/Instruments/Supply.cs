using FakeBench.Faults;
using FakeBench.Fixtures;
using FakeBench.Scpi;

namespace FakeBench.Instruments;

/// <summary>The DC supply that charges the bank.</summary>
/// <remarks>
/// It gives current only, so with its output off, or below the bank's voltage, it says nothing about the bank: its own
/// reading is that of its terminals behind a blocking diode.
/// </remarks>
public sealed class Supply : Instrument
{
    /// <summary>Stated accuracy of its reading of the current, A: up to its largest limit, whatever the pace.</summary>
    public const double CurrentAccuracy = 1e-3;

    // Its own inaccuracy: well inside the 0.5 % that it states of the voltage, and inside the above: at 2.5 A the gain
    // is off by 0.75 mA.
    private const double VoltageGain = 0.998;
    private const double VoltageOffset = 0.3;
    private const double CurrentGain = 1.0003;
    private const double CurrentOffset = 0.05e-3;
    private const int QuestionableVoltage = 1 << 0;
    private const int QuestionableCurrent = 1 << 1;
    private const int OperationSettling = 1 << 1;

    private static readonly NumericRange Voltage = new(0, BenchValues.HighestVoltage, 0, "V");

    private static readonly NumericRange Protection =
        new(1, BenchValues.HighestVoltage * 1.1, BenchValues.HighestVoltage * 1.1, "V");

    /// <summary>Makes a supply.</summary>
    public Supply(Bench bench)
        : base(bench, "supply")
    {
        CommandTree commands = Scpi.Commands;
        var current = new NumericRange(0, bench.Values.SupplyLimit, bench.Values.SupplyLimit, "A");
        commands.Number(
            "[SOURce:]VOLTage[:LEVel][:IMMediate][:AMPLitude]",
            Voltage,
            (_, volts) => Bench.Supply.Voltage = Clipped(volts),
            _ => Bench.Supply.Voltage);
        commands.Number(
            "[SOURce:]CURRent[:LEVel][:IMMediate][:AMPLitude]",
            current,
            (_, amperes) => Bench.Supply.Limit = amperes,
            _ => Bench.Supply.Limit);
        commands.Number(
            "[SOURce:]VOLTage:PROTection[:LEVel]",
            Protection,
            (_, volts) => Bench.Supply.Protection = volts,
            _ => Bench.Supply.Protection);
        commands.Event("[SOURce:]VOLTage:PROTection:CLEar", _ => Bench.Supply.Tripped = false);
        commands.Ask("[SOURce:]VOLTage:PROTection:TRIPped?", _ => Numbers.Boolean(Bench.Supply.Tripped));
        commands.Switch("OUTPut[:STATe]", SwitchOutput, () => Bench.Supply.Output);
        commands.Ask("MEASure[:SCALar]:VOLTage[:DC]?", _ => Numbers.Nr3(MeasuredVoltage()));
        commands.Ask("MEASure[:SCALar]:CURRent[:DC]?", _ => Numbers.Nr3(MeasuredCurrent()));
    }

    /// <inheritdoc/>
    protected override string Model =>
        Bench.Faults.Has(FaultCatalogue.WrongIdentity) ? "FAKEBENCH-VOLTMETER" : base.Model;

    /// <inheritdoc/>
    protected override void Refresh()
    {
        int questionable = (Bench.Supply.Tripped ? QuestionableVoltage : 0)
            | (Bench.InCurrentLimit ? QuestionableCurrent : 0);
        Scpi.Status.Questionable.SetCondition(questionable);
        Scpi.Status.Operation.SetCondition(Bench.Slewing ? OperationSettling : 0);
        if (Bench.Faults.Take(FaultCatalogue.ErrorQueueFull))
        {
            for (int i = 0; i <= ErrorList.Capacity; i++)
            {
                Scpi.Status.Report(-222, "left by an earlier user");
            }
        }
    }

    /// <inheritdoc/>
    protected override Answer Deliver(string message, Reply reply) =>
        Bench.Faults.Has(FaultCatalogue.SilentSupply) ? new Answer([]) : base.Deliver(message, reply);

    /// <inheritdoc/>
    protected override void Reset()
    {
        Bench.SwitchSupply(false);
        Bench.Supply.Voltage = Voltage.Default;
        Bench.Supply.Limit = Bench.Values.SupplyLimit;
        Bench.Supply.Protection = Protection.Default;
    }

    private double Clipped(double volts)
    {
        if (volts <= FaultCatalogue.ClipLevel || !Bench.Faults.Has(FaultCatalogue.SupplyClips))
        {
            return volts;
        }

        // Only for who asks afterwards whether anything was clipped.
        _ = Bench.Faults.Take(FaultCatalogue.SupplyClips);
        return FaultCatalogue.ClipLevel;
    }

    private void SwitchOutput(bool on)
    {
        if (on && Bench.Supply.Tripped)
        {
            throw new ScpiException(-221, "the over-voltage protection has tripped: clear it first");
        }

        if (on && !Bench.Chain.Closed)
        {
            throw new ScpiException(-221, "the safety chain is open");
        }

        if (on != Bench.Supply.Output)
        {
            Bench.SwitchSupply(on);
        }
    }

    private double MeasuredVoltage() =>
        (Bench.Supply.Output ? Bench.BankVoltage * VoltageGain : 0) + VoltageOffset;

    private double MeasuredCurrent() => (Bench.SupplyCurrent * CurrentGain) + CurrentOffset;
}
