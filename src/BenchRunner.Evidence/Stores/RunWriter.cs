using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Holds;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Evidence.Stores;

/// <summary>Writes one run. A capture is durable when <see cref="AddCapture"/> returns; the end of a run seals
/// it.</summary>
/// <remarks>
/// Instruments, events, verdicts and values wait for the next durable commit (capture, end, or closing, or every
/// 1,000th of them): all
/// but the events can be formed again from the captures, and one commit a capture is what a disk can bear. Each method
/// throws <see cref="EvidenceException"/> once the store has failed, and
/// <see cref="InvalidOperationException"/> after the run's end. Thread-safe; adding an event never waits for the disk
/// except when it is the 1,000th. An event that comes from another thread while the run is ending may be left out.
/// </remarks>
public sealed class RunWriter
{
    private readonly EvidenceStore _store;
    private readonly long _row;
    private readonly Lock _gate = new();
    private readonly HashSet<object> _taken = [];
    private readonly HashSet<long> _captures = [];
    private int _holds;
    private volatile bool _ended;

    internal RunWriter(EvidenceStore store, long row, string run, int attempt)
    {
        _store = store;
        _row = row;
        Run = run;
        Attempt = attempt;
    }

    /// <summary>Identity of the run: a UUID version 7 as text.</summary>
    public string Run { get; }

    /// <summary>Which run of the device in its lot this is, from 1; 1 without a lot.</summary>
    public int Attempt { get; }

    /// <summary>Records what an instrument says it is.</summary>
    /// <param name="role">The role, e.g. <c>scope</c>; once a run.</param>
    /// <param name="identity">The whole answer to <c>*IDN?</c>.</param>
    /// <param name="serial">Its serial; null or empty: not stated.</param>
    /// <param name="firmware">Its firmware; null or empty: not stated.</param>
    /// <exception cref="ArgumentException">The role has an instrument already.</exception>
    /// <exception cref="EvidenceException">The store has failed.</exception>
    public void AddInstrument(string role, string identity, string? serial, string? firmware)
    {
        TakeOnce(("instrument", role), nameof(role));
        Wait(to => RunRows.Instrument(to, _row, role, identity, Stated(serial), Stated(firmware)));
    }

    /// <summary>Records an event.</summary>
    /// <exception cref="EvidenceException">The store has failed.</exception>
    public void AddEvent(BenchEvent happened)
    {
        ArgumentNullException.ThrowIfNull(happened);
        Wait(to => RunRows.Event(to, _row, happened));
    }

    /// <summary>Stores a capture, durably, before anything is computed from it.</summary>
    /// <param name="capture">The capture.</param>
    /// <returns>What <see cref="AddVerdict"/> and <see cref="AddCaptureValues"/> name it by.</returns>
    /// <exception cref="ArgumentException">No trace, a channel twice, a NaN, or a number that its point has
    /// already.</exception>
    /// <exception cref="EvidenceException">It is not stored; the store takes nothing more.</exception>
    public long AddCapture(CaptureRow capture)
    {
        ArgumentNullException.ThrowIfNull(capture);
        int channels = capture.Traces.DistinctBy(trace => trace.Channel).Count();
        if (channels == 0 || channels != capture.Traces.Count)
        {
            throw new ArgumentException("A capture has at least one trace, and each channel once.", nameof(capture));
        }

        TrainSet? train = capture.Train;
        RefuseNaN(
            nameof(capture), capture.BusVoltage, capture.Temperature, train?.First, train?.Gap, train?.Second,
            train?.GateOn, train?.GateOff);
        foreach (RawTrace trace in capture.Traces)
        {
            RefuseNaN(
                nameof(capture), trace.TimeOrigin, trace.SampleInterval, trace.Increment, trace.Origin,
                trace.Reference);
        }

        TakeOnce((capture.OperatingPoint, capture.Number), nameof(capture));
        Payload payload = Payload.Of(capture.Traces);
        return Commit(to =>
        {
            long id = RunRows.Capture(to, _row, _captures.Count + 1, capture, payload);
            lock (_gate)
            {
                _captures.Add(id);
            }

            return id;
        });
    }

    /// <summary>Records what validity says of a capture.</summary>
    /// <param name="capture">What <see cref="AddCapture"/> returned; once a capture.</param>
    /// <param name="verdict">The verdict.</param>
    /// <param name="loadCurrent">Load current at the first turn-off from the traces, A; null: not formed.</param>
    /// <param name="busVoltage">Bus voltage at the first turn-off from the traces, V; null: not formed.</param>
    /// <exception cref="ArgumentException">A NaN, a capture of another run, or its second verdict.</exception>
    /// <exception cref="EvidenceException">The store has failed.</exception>
    public void AddVerdict(long capture, Verdict verdict, double? loadCurrent, double? busVoltage)
    {
        ArgumentNullException.ThrowIfNull(verdict);
        RefuseNaN(nameof(verdict), loadCurrent, busVoltage, verdict.CorrectedFirstPulse);
        RefuseStranger(capture);
        TakeOnce(("verdict", capture), nameof(capture));
        Wait(to => RunRows.Verdict(to, capture, 0, verdict, loadCurrent, busVoltage));
    }

    /// <summary>Records the quantities of a capture.</summary>
    /// <param name="capture">What <see cref="AddCapture"/> returned; once a capture.</param>
    /// <param name="values">The quantities, each definition once.</param>
    /// <exception cref="ArgumentException">A NaN, a definition twice, a capture of another run, or its second
    /// values.</exception>
    /// <exception cref="EvidenceException">The store has failed.</exception>
    public void AddCaptureValues(long capture, IReadOnlyList<QuantityValue> values)
    {
        ArgumentNullException.ThrowIfNull(values);
        if (values.DistinctBy(value => (value.Quantity, value.Definition)).Count() != values.Count)
        {
            throw new ArgumentException("A definition of a quantity stands twice.", nameof(values));
        }

        foreach (QuantityValue value in values)
        {
            RefuseNaN(nameof(values), value.Value, value.From, value.To);
        }

        RefuseStranger(capture);
        TakeOnce(("values", capture), nameof(capture));
        QuantityValue[] kept = [.. values];
        Wait(to =>
        {
            foreach (QuantityValue value in kept)
            {
                RunRows.CaptureValue(to, capture, 0, value);
            }
        });
    }

    /// <summary>Stores a leakage hold, durably.</summary>
    /// <param name="hold">The hold.</param>
    /// <exception cref="ArgumentException">A NaN.</exception>
    /// <exception cref="EvidenceException">It is not stored; the store takes nothing more.</exception>
    public void AddHold(HoldRow hold)
    {
        ArgumentNullException.ThrowIfNull(hold);
        RefuseNaN(
            nameof(hold), hold.BusVoltage, hold.SupplyCurrent, hold.FirstVoltage, hold.LastVoltage, hold.Seconds,
            hold.Leakage, hold.Bound);
        Commit(to =>
        {
            RunRows.Hold(to, _row, ++_holds, hold);
            return _holds;
        });
    }

    /// <summary>Ends the run with its decision: measurements, outcome and seal, in one transaction.</summary>
    /// <param name="decision">What was decided about the device.</param>
    /// <returns>The seal, lower-case hexadecimal.</returns>
    /// <exception cref="ArgumentException">A NaN, a quantity by one definition twice at one point, or a value of zero
    /// or proving captures, which are no measurement.</exception>
    /// <exception cref="EvidenceException">The run has no end in the file; the store takes nothing more.</exception>
    public string Finish(DeviceDecision decision)
    {
        ArgumentNullException.ThrowIfNull(decision);
        if (decision.Values.DistinctBy(value => (value.OperatingPoint, value.Quantity, value.Definition)).Count()
            != decision.Values.Count)
        {
            throw new ArgumentException("A quantity stands twice by one definition at one point.", nameof(decision));
        }

        foreach (MeasuredValue value in decision.Values)
        {
            if (UncountedPoints.Has(value.OperatingPoint))
            {
                throw new ArgumentException($"{value.OperatingPoint} is no operating point to measure at.",
                    nameof(decision));
            }

            RefuseNaN(
                nameof(decision), value.Value, value.StandardUncertainty, value.ExpandedUncertainty,
                value.CoverageFactor, value.DegreesOfFreedom, value.Lower, value.Upper);
        }

        return End(decision.Outcome, decision.Reason, decision.Values);
    }

    /// <summary>Ends the run as <c>stopped</c>, without measurements.</summary>
    /// <param name="reason">Why bench, safety chain or operator ended it.</param>
    /// <returns>The seal, lower-case hexadecimal.</returns>
    /// <exception cref="EvidenceException">The run has no end in the file; the store takes nothing more.</exception>
    public string Stop(string reason) => End(Outcome.Stopped, reason, []);

    private static string? Stated(string? text) => string.IsNullOrEmpty(text) ? null : text;

    private static void RefuseNaN(string argument, params ReadOnlySpan<double?> values)
    {
        foreach (double? value in values)
        {
            if (value is { } number && double.IsNaN(number))
            {
                throw new ArgumentException("A NaN is no value: give null and the reason.", argument);
            }
        }
    }

    /// <summary>Finds a caller's repetition before the database does: there it would end all writing.</summary>
    private void TakeOnce(object key, string argument)
    {
        RefuseWhenOver();
        lock (_gate)
        {
            if (!_taken.Add(key))
            {
                throw new ArgumentException($"{key} is in the run already.", argument);
            }
        }
    }

    private void RefuseStranger(long capture)
    {
        RefuseWhenOver();
        lock (_gate)
        {
            if (!_captures.Contains(capture))
            {
                throw new ArgumentException($"Capture {capture} is none of this run.", nameof(capture));
            }
        }
    }

    private string End(Outcome outcome, string? reason, IReadOnlyList<MeasuredValue> values)
    {
        return Commit(to =>
        {
            foreach (MeasuredValue value in values)
            {
                RunRows.Measurement(to, _row, 0, value);
            }

            _ended = true; // Under the store's gate: what waits from now on is not written after the seal.
            return RunRows.End(to, _row, outcome, reason, _store.Now());
        });
    }

    private void Wait(Action<SqlSession> rows)
    {
        RefuseWhenOver();
        _store.Wait(to =>
        {
            if (!_ended)
            {
                rows(to);
            }
        });
    }

    private T Commit<T>(Func<SqlSession, T> rows)
    {
        RefuseWhenOver();
        return _store.Commit(rows);
    }

    private void RefuseWhenOver()
    {
        _store.RefuseWhenFailed();
        if (_ended)
        {
            throw new InvalidOperationException($"Run {Run} has ended; nothing is added to it.");
        }
    }
}
