using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Levels;

namespace BenchRunner.Signals.Tests.Edges;

public sealed class GateEdgesTests
{
    private const double Interval = 1e-9;
    private static readonly TwoLevels _levels = new(0, 10);

    [Fact]
    public void A_gate_that_rings_through_half_its_swing_has_one_edge()
    {
        double[] gate = Gate(
            4000, t => t < 1000 ? 0 : 10 + (9 * Math.Exp(-(t - 1000) / 40) * Math.Cos((t - 1000) / 3)));
        GateEdge edge = Assert.Single(Find(gate));
        Assert.Equal(CrossingDirection.Rising, edge.Direction);
        Assert.InRange(edge.At, 999, 1000);
    }

    [Fact]
    public void A_pulse_shorter_than_the_dead_time_still_has_both_its_edges()
    {
        double[] gate = Gate(6000, t => t is >= 1000 and < 1100 or >= 4000 ? 10 : 0);
        Assert.Equal(
            [CrossingDirection.Rising, CrossingDirection.Falling, CrossingDirection.Rising],
            Find(gate).Select(e => e.Direction));
    }

    [Fact]
    public void A_record_that_ends_while_the_gate_rings_below_half_its_swing_holds_no_further_edge()
    {
        double[] gate = Gate(2070, t => t is < 2000 or >= 2050 ? 0 : 10);
        Assert.Equal(CrossingDirection.Rising, Assert.Single(Find(gate)).Direction);
    }

    [Fact]
    public void A_departure_is_the_earliest_crossing_of_ten_percent_of_a_gate_that_rings_back_past_it()
    {
        // 0 to 3 V at 1000, back to 0.5 V, then on: the 10 % level of 1 V is crossed upwards at 1001 and again at 1021.
        double[] gate = Gate(4000, t => t switch
        {
            < 1000 => 0,
            < 1003 => t - 1000,
            < 1008 => 3 - ((t - 1003) / 2),
            < 1020 => 0.5,
            < 1040 => 0.5 + ((t - 1020) / 2),
            _ => 10,
        });
        GateEdge edge = Assert.Single(Find(gate));
        Assert.Equal(1001, edge.Departure, 9);
        Assert.Equal(1029, edge.At, 9);
    }

    [Fact]
    public void A_departure_is_measured_from_the_level_that_the_gate_leaves()
    {
        // The off state has drifted to 1 V: 10 % lies at 1.9 V of the ramp from 1 V at 2000 to 10 V at 2009.
        double[] gate = Gate(4000, t => t < 2000 ? 1 : Math.Min(10, t - 1999));
        Assert.Equal(2000.9, Assert.Single(Find(gate)).Departure, 9);
    }

    [Fact]
    public void Ninety_to_ten_percent_is_an_edges_duration()
    {
        double[] gate = Gate(4000, t => t < 2000 ? 10 : Math.Max(0, 10 - ((t - 2000) / 10)));
        GateEdge edge = Assert.Single(Find(gate));
        Assert.Equal(80, GateEdges.Duration(gate, _levels, 0.1, edge, 3999)!.Value, 9);
        Assert.Null(GateEdges.Duration(gate, _levels, 0.1, edge, 2050));
    }

    private static GateEdge[] Find(double[] gate) => GateEdges.Find(gate, Interval, _levels, 0.1, 250e-9);

    private static double[] Gate(int count, Func<double, double> of) =>
        [.. Enumerable.Range(0, count).Select(i => of(i))];
}
