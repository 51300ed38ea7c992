namespace BenchRunner.Acceptance.Files;

/// <summary>What reading a file gave: the model, or all the problems.</summary>
/// <typeparam name="T">The model.</typeparam>
/// <param name="Value">The model; null where there are problems.</param>
/// <param name="Problems">All problems of the file, in the order of their places; empty where there is a model.</param>
public sealed record Read<T>(T? Value, IReadOnlyList<Problem> Problems)
    where T : class;
