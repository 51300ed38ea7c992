namespace BenchRunner.Evidence.Notes;

/// <summary>A note that cannot be taken: it says too little, or of a device that is not in the lot. Nothing was
/// stored.</summary>
/// <param name="message">What was found, what was expected, what to do.</param>
public sealed class NoteRefusedException(string message) : Exception(message);
