namespace FakeBench.Fixtures;

/// <summary>What lies at the bank: capacitance, resistances, and how the supply feeds it.</summary>
/// <param name="Capacitance">Bank, F; above 0.</param>
/// <param name="Conductance">Everything that drains it, S; not below 0.</param>
/// <param name="SourceResistance">Output resistance of the supply, Ohm; above 0.</param>
/// <param name="SourceLimit">Its current limit, A.</param>
/// <param name="Connected">Whether its output is on.</param>
public sealed record BusCircuit(
    double Capacitance, double Conductance, double SourceResistance, double SourceLimit, bool Connected);
