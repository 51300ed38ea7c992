using FakeBench.Fixtures;
using FakeBench.Scpi;

namespace FakeBench.Instruments;

/// <summary>The hotplate's controller: set-point, output, measured temperature.</summary>
public sealed class Hotplate : Instrument
{
    private const int OperationSettling = 1 << 1;

    // Its own inaccuracy, K, and the resolution of its reading.
    private const double Error = 0.1;
    private const double Resolution = 0.01;

    // Difference from the set-point at which it counts as settling, K.
    private const double Near = 0.5;

    private static readonly NumericRange SetPoint = new(0, 200, 25, "CEL");

    private readonly Plate _plate;

    /// <summary>Makes a hotplate.</summary>
    /// <param name="bench">The bench.</param>
    /// <param name="plate">Its plate.</param>
    public Hotplate(Bench bench, Plate plate)
        : base(bench, "hotplate")
    {
        ArgumentNullException.ThrowIfNull(plate);
        _plate = plate;
        Scpi.Commands.Number(
            "[SOURce:]TEMPerature:SPOint", SetPoint, (_, celsius) => _plate.SetPoint = celsius, _ => _plate.SetPoint);
        Scpi.Commands.Switch("OUTPut[:STATe]", on => _plate.Output = on, () => _plate.Output);
        Scpi.Commands.Ask("MEASure[:SCALar]:TEMPerature?", _ => Numbers.Nr3(Reading()));
    }

    /// <inheritdoc/>
    protected override void Refresh() => Scpi.Status.Operation.SetCondition(
        _plate.Output && Math.Abs(_plate.Temperature - _plate.SetPoint) > Near ? OperationSettling : 0);

    /// <inheritdoc/>
    protected override void Reset() => (_plate.SetPoint, _plate.Output) = (SetPoint.Default, false);

    private double Reading() => Math.Round((_plate.Temperature + Error) / Resolution) * Resolution;
}
