using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Temperatures;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;

namespace BenchRunner.Runner.Temperatures;

/// <summary>The plate under the device: heated and measured where the bench has a hotplate, else the room.</summary>
/// <param name="hotplate">The hotplate; null: none.</param>
/// <param name="ambient">Stated temperature of the room, degC.</param>
/// <param name="events">Where it says what happens.</param>
/// <param name="time">The clock.</param>
public sealed class Plate(IHotplate? hotplate, double ambient, EventSource events, TimeProvider time)
{
    private static readonly TimeSpan ReadEvery = TimeSpan.FromSeconds(0.5);
    private static readonly TimeSpan SayEvery = TimeSpan.FromMinutes(1);

    /// <summary>A plate that has not come to rest by then has a fault.</summary>
    private static readonly TimeSpan SettlesWithin = TimeSpan.FromHours(1);

    /// <summary>The longest that <see cref="Return"/> may take.</summary>
    public static TimeSpan ReturnsWithin => SettlesWithin + TimeSpan.FromMinutes(1);

    /// <summary>Temperature that is stored with a capture, degC: measured, or the stated one of the room.</summary>
    public async Task<double> Read(CancellationToken cancel) => await Measured(cancel) ?? ambient;

    /// <summary>What the hotplate measures, degC; null where there is none.</summary>
    /// <exception cref="InstrumentException">It cannot be reached, or says nonsense.</exception>
    public async Task<double?> Measured(CancellationToken cancel) =>
        hotplate is null ? null : await OnPlate(() => hotplate.Read(cancel));

    /// <summary>Brings the plate to a temperature and holds it there until the device has it too.</summary>
    /// <param name="wanted">Temperature, degC; null: that of the room, with the heater off.</param>
    /// <param name="tolerance">How far a reading may be off, K.</param>
    /// <param name="soak">Time within tolerance and at rest, s.</param>
    /// <param name="cancel">Ends the wait.</param>
    /// <exception cref="BenchException">It does not come to rest.</exception>
    /// <exception cref="InstrumentException">The hotplate fails.</exception>
    public async Task Settle(double? wanted, double tolerance, double soak, CancellationToken cancel)
    {
        if (hotplate is null)
        {
            return;
        }

        double target = wanted ?? ambient;
        string shown = SiText.Format(target, "degC");
        double now = await OnPlate(() => hotplate.Read(cancel));
        if (wanted is null && Math.Abs(now - target) <= tolerance)
        {
            return;
        }

        events.Say(
            Severity.Information, "soak-started",
            $"plate at {SiText.Format(now, "degC")}, to {shown}; then {SiText.Format(soak, "s")} within "
                + $"{SiText.Format(tolerance, "K")} and at rest");
        await (wanted is { } heat ? OnPlate(() => hotplate.Heat(heat, cancel)) : Off(cancel));
        await Hold(new SoakHold(target, tolerance, soak), shown, cancel);
        events.Say(Severity.Information, "soak-done", $"the plate is at rest at {shown}");
    }

    /// <summary>Waits until the plate is back within tolerance, as long as a plate may take.</summary>
    /// <inheritdoc cref="Settle" path="/exception"/>
    public async Task Return(double wanted, double tolerance, CancellationToken cancel)
    {
        if (hotplate is not null)
        {
            await Hold(new SoakHold(wanted, tolerance, 0), SiText.Format(wanted, "degC"), cancel);
        }
    }

    /// <summary>Switches the heater off; the plate stays hot for a while.</summary>
    public Task Off(CancellationToken cancel) =>
        hotplate is null ? Task.CompletedTask : OnPlate(() => hotplate.MakeSafe(cancel));

    private async Task Hold(SoakHold hold, string shown, CancellationToken cancel)
    {
        long start = time.GetTimestamp();
        TimeSpan said = TimeSpan.Zero;
        while (true)
        {
            double now = await OnPlate(() => hotplate!.Read(cancel));
            TimeSpan since = time.GetElapsedTime(start);
            hold.Saw(since.TotalSeconds, now);
            if (hold.IsDone)
            {
                return;
            }

            if (since > SettlesWithin)
            {
                throw new BenchException(
                    $"the plate is at {SiText.Format(now, "degC")} after {SettlesWithin.TotalMinutes:0} min where "
                        + $"{shown} was set, or does not come to rest; look at heater, sensor and clamping");
            }

            if (since - said >= SayEvery)
            {
                said = since;
                events.Say(
                    Severity.Information, "soaking",
                    $"plate at {SiText.Format(now, "degC")} of {shown}, {SiText.Format(hold.Left, "s")} to hold");
            }

            await Task.Delay(ReadEvery, time, cancel);
        }
    }

    private static async Task OnPlate(Func<Task> work) => await OnPlate(async () =>
    {
        await work();
        return 0;
    });

    /// <summary>A hotplate that cannot be reached ends the run, but energises no bus: it is no reason to trip.</summary>
    private static async Task<T> OnPlate<T>(Func<Task<T>> work)
    {
        try
        {
            return await work();
        }
        catch (LinkException lost)
        {
            throw new InstrumentException("hotplate", lost.Message);
        }
    }
}
