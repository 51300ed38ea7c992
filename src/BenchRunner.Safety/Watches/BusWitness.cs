namespace BenchRunner.Safety.Watches;

/// <summary>What the voltmeter has shown so far: whether its word that the bus is down can be believed.</summary>
/// <remarks>
/// A voltmeter whose lead came off reads 0 V beside a full bank. So its word counts only if it followed the bus up, and
/// a fall faster than half the planned time constant is no proof: something opened between the bank and the meter.
/// </remarks>
public sealed class BusWitness
{
    private readonly Lock _gate = new();
    private double _highestCommanded;
    private double _highestSeen;

    /// <summary>The supply was told to go to this voltage, V.</summary>
    public void Commanded(double voltage)
    {
        lock (_gate)
        {
            _highestCommanded = Math.Max(_highestCommanded, voltage);
        }
    }

    /// <summary>The voltmeter read this voltage, V.</summary>
    public void Saw(double voltage)
    {
        lock (_gate)
        {
            _highestSeen = Math.Max(_highestSeen, voltage);
        }
    }

    /// <summary>The bus was proved down: what was seen before no longer counts.</summary>
    public void ProvedDown()
    {
        lock (_gate)
        {
            _highestCommanded = 0;
            _highestSeen = 0;
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

    /// <summary>Whether more than the low voltage has been commanded or seen since the last proof.</summary>
    public bool MayBeEnergised
    {
        get
        {
            lock (_gate)
            {
                return Math.Max(_highestCommanded, _highestSeen) >= SafetyLimits.BusDown;
            }
        }
    }

    /// <summary>Whether the voltmeter was seen to follow the bus up, or there was nothing to follow.</summary>
    /// <remarks>Half is enough: a run may stop while the bus still rises, and a dead lead shows nothing at
    /// all.</remarks>
    public bool Followed
    {
        get
        {
            lock (_gate)
            {
                return _highestCommanded < SafetyLimits.BusDown || _highestSeen >= SafetyLimits.BusDown;
            }
        }
    }
}
