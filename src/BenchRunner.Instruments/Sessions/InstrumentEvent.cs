namespace BenchRunner.Instruments.Sessions;

/// <summary>Something that happened on the way to an instrument and was dealt with, or is reported as an exception
/// too.</summary>
/// <param name="Role">The role, e.g. <c>supply</c>.</param>
/// <param name="Link">The link as the bench file names it.</param>
/// <param name="Kind">What sort of event.</param>
/// <param name="Message">One line; what the instrument sent is escaped.</param>
public sealed record InstrumentEvent(string Role, string Link, InstrumentEventKind Kind, string Message);
