using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Holds;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Devices;

namespace BenchRunner.Runner.Points;

/// <summary>Holds the bus at each new voltage with both gates off: what the blocking place lets through.</summary>
public sealed class LeakageHolds(DeviceWork work)
{
    private static readonly TimeSpan SupplyRestsWithin = TimeSpan.FromSeconds(1);
    private static readonly TimeSpan HoldsWithin = TimeSpan.FromSeconds(15);
    private static readonly TimeSpan ReadEvery = TimeSpan.FromMilliseconds(50);

    private readonly HashSet<double> _held = [];

    /// <summary>Holds once at each voltage; the bus is at it before and after.</summary>
    /// <param name="permit">The point's permit.</param>
    /// <param name="point">The point.</param>
    /// <param name="cancel">Ends the work.</param>
    /// <exception cref="DeviceFaultException">The device under test leaks.</exception>
    /// <exception cref="BusException">A companion leaks, or the bus does not come back.</exception>
    public async Task Hold(Permit permit, OperatingPoint point, CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(point);
        if (!_held.Add(point.BusVoltage))
        {
            return;
        }

        work.Supervisor.Progress("the leakage hold", HoldsWithin);
        double drawn = await SupplyCurrent(cancel);
        if (LeakageHold.Drawn(drawn, work.Plan.Bench, work.Plan.Sequence) is { } found)
        {
            Fail($"{point.Name}: {found}");
        }

        LeakageReading reading = await Discharge(point, drawn, cancel);
        bool conforms = LeakageHold.Conforms(reading, work.Plan.Bench, work.Plan.Sequence);
        string words = $"{point.Name}: {LeakageHold.Words(reading, work.Plan.Bench, work.Plan.Sequence)}";
        work.Evidence.AddHold(new HoldRow(
            point.Name, work.Time.GetUtcNow(), point.BusVoltage, drawn, reading.First, reading.Last, reading.Seconds,
            LeakageHold.Current(reading, work.Plan.Bench), work.Plan.Sequence.Leakage, conforms));
        work.Events.Say(conforms ? Severity.Information : Severity.Error, "leakage-hold", words);
        if (!conforms)
        {
            Fail(words);
        }

        await work.Bus.On(permit, point.BusVoltage, cancel);
    }

    private void Fail(string found) => throw (StopOutcome.OfShort(work.Plan.Sequence) == Outcome.Rejected
        ? new DeviceFaultException(found)
        : new BusException($"{found}, and it holds the companion", stuckInLimit: false));

    /// <summary>What the supply gives once nothing charges any more; its last reading where that takes too
    /// long.</summary>
    private async Task<double> SupplyCurrent(CancellationToken cancel)
    {
        long start = work.Time.GetTimestamp();
        while (true)
        {
            SupplyState state = await work.Bench.Supply.ReadState(cancel);
            double current = state.MeasuredCurrent.Value;
            if (LeakageHold.Drawn(current, work.Plan.Bench, work.Plan.Sequence) is null
                || work.Time.GetElapsedTime(start) > SupplyRestsWithin)
            {
                return current;
            }

            await Task.Delay(ReadEvery, work.Time, cancel);
        }
    }

    private async Task<LeakageReading> Discharge(OperatingPoint point, double drawn, CancellationToken cancel)
    {
        await work.Bench.Supply.OutputOff(cancel);
        (double first, long from) = await Read(cancel);
        await Task.Delay(LeakageHold.Time, work.Time, cancel);
        (double last, long to) = await Read(cancel);
        return new LeakageReading(
            point.BusVoltage, drawn, first, last, work.Time.GetElapsedTime(from, to).TotalSeconds);
    }

    /// <summary>A reading with the middle of the time in which it was taken.</summary>
    private async Task<(double Volts, long At)> Read(CancellationToken cancel)
    {
        long before = work.Time.GetTimestamp();
        double volts = (await work.Bench.Voltmeter.Read(cancel)).Value;
        return (volts, before + ((work.Time.GetTimestamp() - before) / 2));
    }
}
