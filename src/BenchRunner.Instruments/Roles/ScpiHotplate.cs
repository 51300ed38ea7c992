using BenchRunner.Instruments.Links;

namespace BenchRunner.Instruments.Roles;

/// <summary>A hotplate that speaks SCPI.</summary>
public sealed class ScpiHotplate : IHotplate, IDisposable
{
    // Controllers round a set-point to steps of 0.1 K or of 1 K (common practice); one that was clipped is off by more.
    private const double TemperatureStep = 0.6;

    private static readonly string[] Operations =
        ["set-temperature", "read-temperature", "measure-temperature", "output-on", "output-off", "read-output"];

    private readonly Instrument _instrument;

    private ScpiHotplate(Instrument instrument) => _instrument = instrument;

    /// <inheritdoc/>
    public string Role => _instrument.Role;

    /// <inheritdoc/>
    public InstrumentIdentity Identity => _instrument.Session.Identity;

    /// <summary>Connects; nothing is set.</summary>
    /// <exception cref="InstrumentException">Another instrument than the dialect is for, or no hotplate.</exception>
    /// <exception cref="LinkException">Not reachable, or no SCPI.</exception>
    public static async Task<ScpiHotplate> Connect(InstrumentConnection connection, CancellationToken cancel) =>
        new(await Instrument.Connect("hotplate", Operations, "read-temperature", connection, cancel));

    /// <inheritdoc/>
    public async Task Heat(double celsius, CancellationToken cancel)
    {
        if (!double.IsFinite(celsius))
        {
            throw new ArgumentOutOfRangeException(nameof(celsius), celsius, "must be finite");
        }

        await _instrument.Session.Set(_instrument.Command("set-temperature", celsius), cancel);
        await _instrument.CheckReadBack("set-temperature", "read-temperature", celsius, TemperatureStep, cancel);
        await _instrument.Session.Set(_instrument.Command("output-on"), cancel);
        if (!await _instrument.ReadBoolean("read-output", cancel))
        {
            throw _instrument.Refusal("the heating stays off though it was switched on; look for a tripped limiter");
        }
    }

    /// <inheritdoc/>
    public Task<double> Read(CancellationToken cancel) => _instrument.ReadNumber("measure-temperature", cancel);

    /// <inheritdoc/>
    public async Task MakeSafe(CancellationToken cancel)
    {
        await _instrument.Session.SetDown([_instrument.Command("output-off")], cancel);
        if (await _instrument.ReadBoolean("read-output", cancel))
        {
            throw _instrument.Refusal("the heating stays on though it was switched off; pull its plug");
        }
    }

    /// <summary>Closes the link. Sends nothing.</summary>
    public void Dispose() => _instrument.Dispose();
}
