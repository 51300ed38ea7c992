namespace BenchRunner.Instruments.Roles;

/// <summary>An instrument whose output safety looks at again and again: that it answers is its sign of life.</summary>
public interface IOutput
{
    /// <summary>The role's name, e.g. <c>supply</c>.</summary>
    string Role { get; }

    /// <summary>Reads whether the output is on. Asked once: that the reply was lost is what is to be found out.</summary>
    /// <exception cref="Links.LinkException">The reply was late, malformed or never came.</exception>
    Task<bool> ReadOutput(CancellationToken cancel);
}
