using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Captures;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Points;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Runner.Proving;

/// <summary>Captures in which no train is fired: what the probes show at zero.</summary>
public sealed class ZeroCaptures(DeviceWork work)
{
    private const int Tries = 3;

    /// <summary>Bus voltage below which a bank that still discharges moves no probe while the scope records, V.</summary>
    private const double BankIsEmpty = 1;

    private int _taken;

    /// <summary>The zero of the run, with the bus down: offsets of the voltage probes, zeros of the currents.</summary>
    /// <exception cref="InstrumentException">The scope gives no record.</exception>
    /// <exception cref="BusException">The bank does not empty.</exception>
    public async Task First(CancellationToken cancel)
    {
        PlannedPoint planned = work.Plan.Proving;
        await work.Bench.Safety.Interlock.EngageBleeder(cancel);
        await work.Bus.WaitBelow(BankIsEmpty, cancel);
        await Degauss(cancel);
        work.Zero = await Take(work.Scope(planned, planned.Ranges), cancel);
        work.Events.Say(
            Severity.Information, "zero-capture", "zero capture taken with no train fired: offsets of the probes");
    }

    /// <summary>A new zero of the currents, at a point whose captures keep beginning with one; both gates are
    /// off.</summary>
    /// <inheritdoc cref="First" path="/exception"/>
    public async Task Again(ScopeSettings settings, CancellationToken cancel)
    {
        ZeroReading later = await Take(settings, cancel);
        work.Zero = work.Zero?.WithCurrentsOf(later) ?? later;
        work.Events.Say(
            Severity.Warning, "zero-capture", "three captures in a row began with a current: a new zero capture was "
                + "taken");
    }

    /// <summary>A clamp keeps the field of the last current; where the scope cannot take it off, the confirmation
    /// asks a person to.</summary>
    private async Task Degauss(CancellationToken cancel)
    {
        if (!work.Bench.Scope.CanDegauss)
        {
            return;
        }

        foreach (ChannelSetup clamp in work.Plan.Bench.Channels.Where(setup => setup.Probe == ChannelSetup.Clamp))
        {
            await work.Bench.Scope.Degauss(clamp.Input, cancel);
            work.Events.Say(Severity.Information, "degaussed", $"the clamp of {clamp.Channel.Name()} is degaussed");
        }
    }

    private async Task<ZeroReading> Take(ScopeSettings settings, CancellationToken cancel)
    {
        for (int i = 0; i < Tries; i++)
        {
            double bank = (await work.Bench.Voltmeter.Read(cancel)).Value;
            DateTimeOffset at = work.Time.GetUtcNow();
            if (await work.Firing.RecordNow(settings, cancel) is { Traces.Count: > 0 } record)
            {
                double plate = await work.Plate.Read(cancel);
                work.Evidence.AddCapture(new CaptureRow(
                    UncountedPoints.Zero, ++_taken, at, record.Traces, bank, plate, null));
                return ZeroReading.Of(record.Traces, work.Plan.Bench, work.Plan.Sequence, bank);
            }
        }

        throw new InstrumentException("scope", $"{Tries} zero captures left no record; check trigger and link");
    }
}
