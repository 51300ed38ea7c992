namespace BenchRunner.Evidence.Queries;

/// <summary>A question cannot be answered as it was asked: its name, a filter, the SQL or the file is wrong.</summary>
/// <param name="message">What was found, and what to do.</param>
/// <param name="inner">What the database said; null where it was not asked.</param>
public sealed class QueryException(string message, Exception? inner = null) : Exception(message, inner);
