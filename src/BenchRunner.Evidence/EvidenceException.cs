namespace BenchRunner.Evidence;

/// <summary>The evidence could not be opened, written or read: a fault of the outside world, never of the
/// caller.</summary>
/// <param name="message">The file, what was found, what to do.</param>
/// <param name="inner">What the database or the file system said; null where nothing did.</param>
public sealed class EvidenceException(string message, Exception? inner = null) : Exception(message, inner);
