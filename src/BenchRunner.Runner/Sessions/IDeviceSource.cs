namespace BenchRunner.Runner.Sessions;

/// <summary>Where the serials of a session come from: the command line, or a bar-code reader.</summary>
public interface IDeviceSource
{
    /// <summary>The next serial; null where there is none. Serials of a wrong form never get this far.</summary>
    Task<string?> Next(CancellationToken cancel);

    /// <summary>Serials that are known already and were not asked for yet.</summary>
    IReadOnlyList<string> Waiting { get; }

    /// <summary>Whether more may come from a reader; false: <see cref="Waiting"/> are all.</summary>
    bool FromReader { get; }
}
