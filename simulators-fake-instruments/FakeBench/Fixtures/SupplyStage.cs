namespace FakeBench.Fixtures;

/// <summary>The power stage of the supply: what it was told, and whether its protection has acted.</summary>
public sealed class SupplyStage
{
    /// <summary>Set-point of the voltage, V.</summary>
    public double Voltage { get; set; }

    /// <summary>Set-point of the current limit, A.</summary>
    public required double Limit { get; set; }

    /// <summary>Level of the over-voltage protection, V; at first where the lab left it.</summary>
    public double Protection { get; set; } = BenchValues.Envelope;

    /// <summary>Whether the over-voltage protection has acted; it stays so until it is cleared.</summary>
    public bool Tripped { get; set; }

    /// <summary>Whether the output is on.</summary>
    public bool Output { get; set; }
}
