namespace FakeBench.Physics;

/// <summary>Keeps the noiseless trains of late, so that a repeated capture at one operating point pays for noise
/// only.</summary>
/// <remarks>A train is found again when every parameter of circuit, train and grid is equal to the last bit. Safe on
/// many
/// threads; two that miss at once both solve, with equal results.</remarks>
public sealed class TrajectoryCache
{
    /// <summary>Samples kept in all: 8 million are 64 MB.</summary>
    private const long MostSamples = 8_000_000;

    private readonly Lock _gate = new();
    private readonly LinkedList<(Key Key, TrainTrajectory Train)> _newestFirst = new();

    /// <summary>The train, solved now or before.</summary>
    /// <inheritdoc cref="HalfBridge.Simulate" path="/param"/>
    /// <inheritdoc cref="HalfBridge.Simulate" path="/exception"/>
    public TrainTrajectory Get(CircuitParameters parts, PulseTrain train, double start, double interval, int points)
    {
        var key = new Key(parts, train, start, interval, points);
        if (Find(key) is { } known) return known;
        var solved = HalfBridge.Simulate(parts, train, start, interval, points);
        Keep(key, solved);
        return solved;
    }

    private TrainTrajectory? Find(Key key)
    {
        lock (_gate)
        {
            for (var node = _newestFirst.First; node is not null; node = node.Next)
            {
                if (node.Value.Key != key) continue;
                _newestFirst.Remove(node);
                _newestFirst.AddFirst(node);
                return node.Value.Train;
            }
        }

        return null;
    }

    private void Keep(Key key, TrainTrajectory train)
    {
        lock (_gate)
        {
            _newestFirst.AddFirst((key, train));
            long samples = 0;
            foreach (var (_, kept) in _newestFirst) samples += (long)kept.Points * kept.Signals.Length;
            while (samples > MostSamples && _newestFirst.Count > 1)
            {
                var oldest = _newestFirst.Last!.Value.Train;
                samples -= (long)oldest.Points * oldest.Signals.Length;
                _newestFirst.RemoveLast();
            }
        }
    }

    private sealed record Key(CircuitParameters Parts, PulseTrain Train, double Start, double Interval, int Points);
}
