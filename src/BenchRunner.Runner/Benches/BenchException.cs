namespace BenchRunner.Runner.Benches;

/// <summary>The bench is not fit to run on: an instrument is missing, of the wrong kind, or a mixture of real and
/// simulated.</summary>
/// <param name="message">What was found and what to do.</param>
/// <param name="inner">What caused it, if anything.</param>
public sealed class BenchException(string message, Exception? inner = null) : Exception(message, inner);
