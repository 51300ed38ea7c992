namespace FakeBench.Faults;

/// <summary>What a fault is.</summary>
/// <param name="Name">Its name on the command line.</param>
/// <param name="Begins">When it begins unless <c>@when</c> says otherwise.</param>
/// <param name="Shows">What it shows.</param>
public sealed record FaultKind(string Name, Moment Begins, string Shows)
{
    /// <summary>Whose link it meets where no role is named; null: it is none of a link.</summary>
    public string? Role { get; init; }
}
