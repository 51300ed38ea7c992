namespace BenchRunner.Instruments.Roles;

/// <summary>An instrument that can be brought to its safe side without a permit, at any time, as often as
/// wanted.</summary>
public interface ISafeable
{
    /// <summary>The role's name, e.g. <c>supply</c>.</summary>
    string Role { get; }

    /// <summary>Sends the commands of the safe side (pulses inhibited, output off and 0 V, bleeder engaged) and reads
    /// them back.</summary>
    /// <exception cref="Links.LinkException">The instrument could not be reached; what it does is unknown:
    /// energised.</exception>
    Task MakeSafe(CancellationToken cancel);
}
