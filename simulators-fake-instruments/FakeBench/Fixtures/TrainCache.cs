using FakeBench.Physics;

namespace FakeBench.Fixtures;

/// <summary>Noiseless trains, computed once: the same device at the same operating point gives the same one.</summary>
/// <remarks>A train can be asked for ahead of time, while pulser and scope are armed; it is then there when it is
/// fired.</remarks>
/// <param name="places">How many trains are kept.</param>
public sealed class TrainCache(int places = 8)
{
    private readonly Lock _gate = new();
    private readonly List<(Key Key, Lazy<TrainTrajectory> Train)> _trains = [];

    /// <summary>Starts to compute a train beside what goes on.</summary>
    public void Prepare(CircuitParameters circuit, PulseTrain train, Window window)
    {
        Lazy<TrainTrajectory> entry = Entry(circuit, train, window, out bool isNew);
        if (isNew)
        {
            _ = Task.Run(() => entry.Value);
        }
    }

    /// <summary>The train; waits until it is computed.</summary>
    /// <exception cref="ArithmeticException">The circuit cannot be solved.</exception>
    public TrainTrajectory Get(CircuitParameters circuit, PulseTrain train, Window window) =>
        Entry(circuit, train, window, out _).Value;

    private Lazy<TrainTrajectory> Entry(CircuitParameters circuit, PulseTrain train, Window window, out bool isNew)
    {
        var key = new Key(circuit, train, window);
        lock (_gate)
        {
            foreach ((Key known, Lazy<TrainTrajectory> cached) in _trains)
            {
                if (known == key)
                {
                    isNew = false;
                    return cached;
                }
            }

            isNew = true;
            var entry = new Lazy<TrainTrajectory>(
                () => HalfBridge.Simulate(circuit, train, window.Start, window.Interval, window.Points));
            if (_trains.Count == places)
            {
                _trains.RemoveAt(0);
            }

            _trains.Add((key, entry));
            return entry;
        }
    }

    private sealed record Key(CircuitParameters Circuit, PulseTrain Train, Window Window);
}
