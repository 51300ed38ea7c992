namespace BenchRunner.Instruments.Roles;

/// <summary>The digitiser that records one pulse train on several channels.</summary>
public interface IScope
{
    /// <summary>What the instrument said it is.</summary>
    InstrumentIdentity Identity { get; }

    /// <summary>Sets time base, trigger and ranges and asks each back. Settings that stand already are not sent
    /// again.</summary>
    /// <exception cref="InstrumentException">A read-back differs by more than 1 %, or the error queue holds
    /// something.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task Configure(ScopeSettings settings, CancellationToken cancel);

    /// <summary>Starts an acquisition and waits until the scope says that it waits for its trigger.</summary>
    Task Arm(CancellationToken cancel);

    /// <summary>Waits until the acquisition is complete.</summary>
    /// <returns>False where the deadline passed first (trigger missed): the acquisition was then aborted.</returns>
    Task<bool> WaitForRecord(TimeSpan deadline, CancellationToken cancel);

    /// <summary>Acquisitions completed since the scope was switched on.</summary>
    Task<long> ReadCount(CancellationToken cancel);

    /// <summary>Reads preamble and codes of every channel of the settings in force, in one stopped state.</summary>
    Task<ScopeRecord> Read(CancellationToken cancel);

    /// <summary>Ends a waiting acquisition.</summary>
    Task Abort(CancellationToken cancel);
}
