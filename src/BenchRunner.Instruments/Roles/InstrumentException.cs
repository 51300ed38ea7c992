namespace BenchRunner.Instruments.Roles;

/// <summary>An instrument answered, but not what it must: a set-point clipped, an error in its queue, a wrong
/// identity.</summary>
/// <param name="role">The role, e.g. <c>supply</c>.</param>
/// <param name="message">What was found, what was expected, what to do.</param>
public class InstrumentException(string role, string message) : Exception($"{role}: {message}")
{
    /// <summary>The role whose instrument it was.</summary>
    public string Role { get; } = role;
}
