using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Edges;

/// <summary>The edges of a pulse train, from the firing gate.</summary>
public static class GateEdges
{
    // The state before an edge is looked at from 0.8 to 0.4 µs before it: late enough to be settled, early enough
    // not to hold the edge itself.
    private const double StateFrom = 0.8e-6;
    private const double StateTo = 0.4e-6;

    /// <summary>All edges of a gate voltage, rising and falling in turn.</summary>
    /// <param name="gate">Gate voltage, V, uniform, finite; not modified.</param>
    /// <param name="dt">Sample interval, s; above 0.</param>
    /// <param name="levels">Off and on level, V.</param>
    /// <param name="hysteresis">How far beyond a level the gate must go for a crossing to count, V.</param>
    /// <param name="deadTime">Time after an edge in which further crossings of 50 % do not count, s.</param>
    /// <returns>The edges in time order; empty where the gate does not switch.</returns>
    /// <exception cref="ArgumentException">A sample is NaN or infinite.</exception>
    /// <remarks>
    /// An edge lies at a crossing of 50 % after which further ones do not count for the dead time: a gate rings through
    /// 50 % many times. Where the dead time ends in the other state all the same (a pulse shorter than it), the last
    /// crossing inside it is an edge. A record that ends within the dead time does not say so: the gate may be ringing.
    /// </remarks>
    public static GateEdge[] Find(
        Samples gate, double dt, TwoLevels levels, double hysteresis, double deadTime)
    {
        List<GateEdge> edges = [];
        double dead = deadTime / dt;
        double skipped = double.NaN;
        CrossingScan scan = new(gate, levels.At(0.5), hysteresis, 0, gate.Length - 1, isFinite: false);
        bool above = gate.Length > 0 && gate[0] > levels.At(0.5);
        while (scan.Next())
        {
            above = scan.Direction == CrossingDirection.Rising;
            if (edges.Count > 0 && scan.Position - edges[^1].At < dead)
            {
                skipped = scan.Position;
                continue;
            }

            if (edges.Count > 0 && edges[^1].Direction == scan.Direction)
            {
                Add(edges, gate, dt, levels, hysteresis, dead, skipped, Opposite(scan.Direction));
            }

            Add(edges, gate, dt, levels, hysteresis, dead, scan.Position, scan.Direction);
        }

        if (edges.Count > 0 && gate.Length - 1 - edges[^1].At >= dead
            && above != (edges[^1].Direction == CrossingDirection.Rising))
        {
            Add(edges, gate, dt, levels, hysteresis, dead, skipped, Opposite(edges[^1].Direction));
        }

        return [.. edges];
    }

    /// <summary>Duration of a gate edge: from its departure to the crossing of the level as near to the other
    /// state.</summary>
    /// <param name="gate">Gate voltage, V, uniform, finite.</param>
    /// <param name="levels">Off and on level, V.</param>
    /// <param name="hysteresis">Hysteresis of crossings, V.</param>
    /// <param name="edge">The edge.</param>
    /// <param name="end">Where the search ends, in samples: the departure of the next edge, or the record's
    /// end.</param>
    /// <returns>10 % to 90 % (turn-on) or 90 % to 10 % (turn-off), in samples; null where the end comes
    /// first.</returns>
    /// <exception cref="ArgumentException">A sample of the edge is NaN or infinite.</exception>
    public static double? Duration(
        Samples gate, TwoLevels levels, double hysteresis, in GateEdge edge, double end)
    {
        double level = levels.At(edge.Direction == CrossingDirection.Rising ? 0.9 : 0.1);
        double? reached = Crossing.First(gate, level, hysteresis, edge.Direction, edge.Departure, end);
        return reached - edge.Departure;
    }

    private static CrossingDirection Opposite(CrossingDirection direction) =>
        direction == CrossingDirection.Rising ? CrossingDirection.Falling : CrossingDirection.Rising;

    private static void Add(
        List<GateEdge> edges,
        Samples gate,
        double dt,
        TwoLevels levels,
        double hysteresis,
        double dead,
        double at,
        CrossingDirection direction)
    {
        double state = edges.Count > 0 ? edges[^1].At : 0;
        double departure = Departure(gate, dt, levels, hysteresis, dead, state, at, direction);
        edges.Add(new GateEdge(at, departure, direction));
    }

    /// <summary>The earliest crossing of 10 % (90 % at turn-off) of the cluster that leads to the edge.</summary>
    /// <remarks>The percents lie between the level the gate leaves, which may have drifted, and the other
    /// state's.</remarks>
    private static double Departure(
        Samples gate,
        double dt,
        TwoLevels levels,
        double hysteresis,
        double dead,
        double state,
        double at,
        CrossingDirection direction)
    {
        double left = LevelLeft(gate, dt, state, at);
        double other = direction == CrossingDirection.Rising ? levels.High : levels.Low;
        double level = left + (0.1 * (other - left));
        int until = Math.Min(gate.Length - 1, (int)Math.Ceiling(at));
        CrossingScan scan = new(gate, level, hysteresis, (int)state, until, isFinite: true);
        double last = double.NegativeInfinity;
        double earliest = double.NaN;
        while (scan.Next() && scan.Position <= at)
        {
            earliest = scan.Position - last < dead ? earliest : double.NaN;
            if (double.IsNaN(earliest) && scan.Direction == direction)
            {
                earliest = scan.Position;
            }

            last = scan.Position;
        }

        return double.IsNaN(earliest) ? at : earliest;
    }

    /// <summary>Median of the gate from 0.8 to 0.4 µs before the edge, or of the middle half of a shorter state,
    /// V.</summary>
    private static double LevelLeft(Samples gate, double dt, double state, double at)
    {
        bool longEnough = (at - state) * dt >= StateFrom;
        double from = longEnough ? at - (StateFrom / dt) : state + ((at - state) / 4);
        double to = longEnough ? at - (StateTo / dt) : at - ((at - state) / 4);
        int first = Math.Clamp((int)Math.Ceiling(from), 0, gate.Length - 1);
        int count = Math.Clamp((int)Math.Floor(to) - first + 1, 1, gate.Length - first);
        return Median.Of(gate.Slice(first, count));
    }
}
