namespace BenchRunner.Runner.Benches;

/// <summary>Hands at the fixture: <c>open</c>, <c>insert SERIAL</c>, <c>close</c>.</summary>
public interface IHands
{
    /// <summary>Does one thing at the fixture.</summary>
    /// <exception cref="BenchException">The bench is gone.</exception>
    Task Do(string hand, CancellationToken cancel);
}
