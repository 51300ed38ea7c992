using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Safety.SafeStates;

namespace BenchRunner.Safety.Watches;

/// <summary>What the voltmeter has shown so far: whether its word that the bus is down can be believed.</summary>
/// <remarks>
/// A voltmeter whose lead came off reads 0 V beside a full bank. So its word counts only if it followed each step of the
/// bus up, and every reading is held against the last one that could be believed, whoever took it and whatever the
/// supply did: a fall faster than half the planned time constant is no proof, something opened between the bank and the
/// meter. What was once disbelieved stays so. Thread-safe.
/// </remarks>
/// <param name="discharge">The bank and its bleeder.</param>
/// <param name="limits">When the bank counts as down.</param>
/// <param name="time">The clock of the readings.</param>
public sealed class BusWitness(Discharge discharge, SafetySettings limits, TimeProvider time)
{
    /// <summary>Share of the expected voltage by which a reading may lie lower without being disbelieved: the droop of
    /// a pulse train and the reading's own error.</summary>
    private const double Droop = 0.2;

    /// <summary>Share of a low step that the voltmeter must have shown; of a high one, that the bank is no longer
    /// down.</summary>
    private const double ShareOfStep = 0.5;

    private readonly Lock _gate = new();
    private double _highestCommanded;
    private double _highestSeen;
    private double _step;
    private double _seenInStep;
    private double _missedStep;
    private (double Volts, long At)? _believed;
    private long _believedAt;
    private bool _isUndecided;
    private long? _firedAt;
    private string? _fell;

    /// <summary>Voltage below which the bank is down by voltage and by energy, V.</summary>
    public double DownBelow { get; } = limits.DownBelow(discharge.Capacitance);

    /// <summary>When the bank counts as down.</summary>
    public SafetySettings Limits => limits;

    /// <summary>The bank and its bleeder.</summary>
    public Discharge Discharge => discharge;

    /// <summary>The supply was told to go to this voltage, V.</summary>
    public void Commanded(double voltage)
    {
        lock (_gate)
        {
            _missedStep = Math.Max(_missedStep, MissedNow());
            (_step, _seenInStep) = (voltage, 0);
            _highestCommanded = Math.Max(_highestCommanded, voltage);
        }
    }

    /// <summary>A train is about to be fired: what the bus loses by it, a shorted device all of it, is no fall of the
    /// voltmeter's own; a voltage that fell so is not believed either.</summary>
    public void Firing()
    {
        lock (_gate)
        {
            // Until its end is known: a reading asked for meanwhile may have been taken before it or after.
            _firedAt = long.MaxValue;
        }
    }

    /// <summary>The train has been fired, or could not be.</summary>
    public void Fired()
    {
        lock (_gate)
        {
            _firedAt = time.GetTimestamp();
        }
    }

    /// <summary>The voltmeter read this voltage.</summary>
    /// <param name="voltage">The reading without its sign, V.</param>
    /// <param name="asked">Time stamp from before it was asked for: the fall is judged by the longest time that may
    /// lie between two readings.</param>
    /// <returns>Why this reading cannot be true, where no train explains it; null where nothing is wrong.</returns>
    public string? Saw(double voltage, long asked)
    {
        lock (_gate)
        {
            long now = time.GetTimestamp();
            _highestSeen = Math.Max(_highestSeen, voltage);
            _seenInStep = Math.Max(_seenInStep, voltage);
            if (_believed is not { } before || before.Volts < DownBelow)
            {
                Believe(voltage, asked, now);
                return null;
            }

            if (_fell is not null)
            {
                return null;
            }

            double seconds = time.GetElapsedTime(before.At, now).TotalSeconds;
            double fastest = before.Volts * Math.Exp(-seconds / (0.5 * discharge.TimeConstant));
            if (voltage >= fastest)
            {
                Believe(voltage, asked, now);
                return null;
            }

            // Asked for before the believed one had come, on another link: perhaps taken before it, on the way up.
            _isUndecided = asked < _believedAt;
            if (_isUndecided || voltage >= (1 - Droop) * fastest)
            {
                return null;
            }

            bool byTrain = _firedAt is { } fired && fired >= before.At;
            _fell = $"the voltmeter fell from {before.Volts:0} V to {voltage:0.0} V in {seconds:0.000} s, faster than "
                + (byTrain
                    ? "the bleeder can, after a train: a device may have shorted the bank, or a fuse or lead have "
                        + "opened and the bank be full"
                    : "the bleeder can: a fuse or lead may have opened and the bank be full");
            return byTrain ? null : _fell;
        }
    }

    /// <summary>Takes over what another process has seen, in place of all that was known here.</summary>
    /// <param name="commanded">Highest voltage commanded since the last proof, V.</param>
    /// <param name="seen">Highest voltage seen since then, V.</param>
    /// <param name="believed">The last reading that could be believed, V; null: not told, so that a fall is judged from
    /// the first reading on that is taken here.</param>
    /// <param name="isDoubted">Whether the other process no longer believes the voltmeter.</param>
    public void Told(double commanded, double seen, double? believed = null, bool isDoubted = false)
    {
        lock (_gate)
        {
            _fell ??= isDoubted
                ? "the run no longer believed the voltmeter: a fuse or lead may have opened and the bank be full" : null;
            (_highestCommanded, _highestSeen, _step, _seenInStep) = (commanded, seen, commanded, seen);
            _isUndecided = false;
            _believed = believed is { } volts ? (volts, time.GetTimestamp()) : null;
        }
    }

    /// <summary>The bus was proved down: what was seen before no longer counts.</summary>
    public void ProvedDown()
    {
        lock (_gate)
        {
            (_highestCommanded, _highestSeen, _step, _seenInStep, _missedStep) = (0, 0, 0, 0, 0);
            (_believed, _firedAt, _isUndecided) = (null, null, false);
        }
    }

    /// <summary>The highest voltage that was commanded since the last proof, V.</summary>
    public double HighestCommanded
    {
        get
        {
            lock (_gate)
            {
                return _highestCommanded;
            }
        }
    }

    /// <summary>The highest voltage that the voltmeter has shown since the last proof, V.</summary>
    public double HighestSeen
    {
        get
        {
            lock (_gate)
            {
                return _highestSeen;
            }
        }
    }

    /// <summary>The last reading that could be believed, V; null: there was none since the last proof.</summary>
    public double? LastBelieved
    {
        get
        {
            lock (_gate)
            {
                return _believed?.Volts;
            }
        }
    }

    /// <summary>Whether the last reading may be an older one that came late: the next one tells.</summary>
    public bool IsUndecided
    {
        get
        {
            lock (_gate)
            {
                return _isUndecided;
            }
        }
    }

    /// <summary>Whether the voltmeter has shown what cannot be true: no later reading makes up for it.</summary>
    public bool IsDoubted
    {
        get
        {
            lock (_gate)
            {
                return _fell is not null || _missedStep > 0;
            }
        }
    }

    /// <summary>Whether more than the low voltage has been commanded or seen since the last proof.</summary>
    public bool MayBeEnergised => Highest >= DownBelow;

    /// <summary>The highest voltage that was commanded or seen since the last proof, V: what an unknown bus counts
    /// as.</summary>
    public double Highest => Math.Max(HighestCommanded, HighestSeen);

    /// <summary>Why the voltmeter's word that the bus is down proves nothing; null where it is believed.</summary>
    public string? WhyNot
    {
        get
        {
            lock (_gate)
            {
                double missed = Math.Max(_missedStep, MissedNow());
                return missed > 0
                    ? $"the voltmeter never followed the bus up to {missed:0} V, so its low reading proves nothing: "
                        + "look for an open lead"
                    : _fell;
            }
        }
    }

    /// <summary>What the bank may hold where nothing is known of it.</summary>
    public string AtMost => $"up to {discharge.Words(Highest)} may be in the bank";

    /// <summary>When the bus counts as down, in words, e.g. <c>60 V DC and 350 mJ</c>.</summary>
    public string DownWords => $"{limits.BusDown:0.#} V DC and {SiText.Format(limits.EnergyDown, "J", 3)}";

    private void Believe(double voltage, long asked, long now) =>
        (_believed, _believedAt, _isUndecided) = ((voltage, asked), now, false);

    /// <summary>A run may end while the bus still rises: a voltmeter that has shown it charged lives, and what opens later
    /// is a fall that no bleeder explains.</summary>
    private double MissedNow() =>
        _step >= DownBelow && _seenInStep < Math.Min(ShareOfStep * _step, DownBelow) ? _step : 0;
}
