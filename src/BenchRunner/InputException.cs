namespace BenchRunner;

/// <summary>The input is wrong; the message says everything the user needs, possibly on several lines.</summary>
/// <param name="message">What was found, what was expected, what to do.</param>
internal sealed class InputException(string message) : Exception(message);
