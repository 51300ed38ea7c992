using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Roles;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.SafeStates;

/// <summary>Reads the voltmeter until it proves the bus down, or twice the planned time has passed.</summary>
internal sealed class BusProof(
    IVoltmeter voltmeter, BusWitness witness, EventSource events, TimeProvider time, Action? round)
{
    private static readonly TimeSpan ReadEvery = TimeSpan.FromMilliseconds(20);
    private static readonly TimeSpan ReadWithin = TimeSpan.FromSeconds(1);

    /// <summary>Grace beyond the planned time before it is said, and beyond twice it before it is given up.</summary>
    private static readonly TimeSpan Grace = TimeSpan.FromSeconds(1);

    private readonly long _start = time.GetTimestamp();
    private double? _last;
    private DateTimeOffset? _at;
    private string? _silent;
    private TimeSpan? _planned;
    private TimeSpan _limit = TimeSpan.FromSeconds(3);
    private bool _saidSlow;

    public async Task<SafeStateReport> Take()
    {
        while (true)
        {
            round?.Invoke();
            await Read();
            if (_silent is null && _last < witness.DownBelow && !witness.IsUndecided)
            {
                return Report(witness.WhyNot);
            }

            TimeSpan passed = time.GetElapsedTime(_start);
            if (passed > _limit)
            {
                return Report(
                    _silent is null
                        ? $"bus at {witness.Discharge.Words(_last!.Value)} after {passed.TotalSeconds:0.0} s, expected "
                            + $"below {witness.DownWords}"
                        : $"voltmeter: {_silent}");
            }

            SaySlow(passed);
            await Task.Delay(ReadEvery, time);
        }
    }

    private async Task Read()
    {
        try
        {
            using var patience = new CancellationTokenSource(ReadWithin, time);
            long asked = time.GetTimestamp();
            double volts = Math.Abs((await voltmeter.Read(patience.Token)).Value);
            _ = witness.Saw(volts, asked);
            (_last, _at, _silent) = (volts, time.GetUtcNow(), null);
            if (_planned is null)
            {
                TimeSpan planned = TimeSpan.FromSeconds(witness.Discharge.TimeTo(volts, witness.DownBelow));
                _planned = planned;
                _limit = time.GetElapsedTime(_start) + (2 * planned) + Grace;
            }
        }
        catch (Exception failure)
        {
            _silent = failure is OperationCanceledException
                ? $"no answer within {ReadWithin.TotalSeconds:0} s" : failure.Message;
        }
    }

    private void SaySlow(TimeSpan passed)
    {
        if (!_saidSlow && _planned is { } planned && passed > planned + Grace)
        {
            _saidSlow = true;
            events.Say(
                Severity.Alarm,
                "bus-slow",
                $"the bus is still at {witness.Discharge.Words(_last!.Value)} after {passed.TotalSeconds:0.0} s, "
                    + $"{planned.TotalSeconds:0.0} s were planned: the bleeder may be open or the supply still on. "
                    + "WAIT; DO NOT OPEN the enclosure.");
        }
    }

    private SafeStateReport Report(string? why)
    {
        double energy = witness.Discharge.Energy(why is null ? _last!.Value : Math.Max(witness.Highest, _last ?? 0));
        return new SafeStateReport(why is null, _last, _at, energy, why is null ? [] : [why]);
    }
}
