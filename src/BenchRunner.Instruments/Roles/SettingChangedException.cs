namespace BenchRunner.Instruments.Roles;

/// <summary>A setting that stood is another one now, though this program did not change it: what was captured since
/// it was last asked back is in doubt.</summary>
/// <param name="role">The role, e.g. <c>scope</c>.</param>
/// <param name="message">What was found, what was set, what to do.</param>
public sealed class SettingChangedException(string role, string message) : InstrumentException(role, message);
