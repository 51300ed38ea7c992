using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Roles;

/// <summary>A voltmeter that speaks SCPI.</summary>
public sealed class ScpiVoltmeter : IVoltmeter, IDisposable
{
    private const string OutputState = "OUTPut:STATe?";

    private static readonly string[] Operations = ["measure-voltage"];

    private readonly Instrument _instrument;

    private ScpiVoltmeter(Instrument instrument) => _instrument = instrument;

    /// <inheritdoc/>
    public InstrumentIdentity Identity => _instrument.Session.Identity;

    /// <summary>Connects; refuses an instrument that has an output: a source's reading of itself is no independent
    /// proof.</summary>
    /// <exception cref="InstrumentException">Another instrument than the dialect is for, or no voltmeter.</exception>
    /// <exception cref="Links.LinkException">Not reachable, or no SCPI.</exception>
    public static async Task<ScpiVoltmeter> Connect(InstrumentConnection connection, CancellationToken cancel)
    {
        var instrument = await Instrument.Connect("voltmeter", Operations, "measure-voltage", connection, cancel);
        try
        {
            var (output, _) = await instrument.Session.Probe(OutputState, cancel);
            return output is null
                ? new ScpiVoltmeter(instrument)
                : throw instrument.Refusal(
                    $"'{instrument.Session.Identity.Text}' has an output, so it is a source and no independent "
                        + $"voltmeter; check the link");
        }
        catch
        {
            instrument.Dispose();
            throw;
        }
    }

    /// <inheritdoc/>
    public async Task<Volts> Read(CancellationToken cancel) =>
        new(await _instrument.ReadSurely("measure-voltage", cancel));

    /// <summary>Closes the link. Sends nothing.</summary>
    public void Dispose() => _instrument.Dispose();
}
