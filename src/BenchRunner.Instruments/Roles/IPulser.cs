using BenchRunner.Instruments.Permits;

namespace BenchRunner.Instruments.Roles;

/// <summary>The gate pulser that fires a train of two pulses.</summary>
public interface IPulser : IGates
{
    /// <summary>What the instrument said it is.</summary>
    InstrumentIdentity Identity { get; }

    /// <summary>Sets gate levels and pulse widths and reads each back; the gates are held at their off level.</summary>
    /// <returns>The settings as read back.</returns>
    /// <exception cref="PermitException">The permit is dead or a value is beyond its bounds; nothing was
    /// set.</exception>
    /// <exception cref="SettingChangedException">What this program had set before is not what stands now; nothing was
    /// overwritten.</exception>
    /// <exception cref="InstrumentException">A read-back differs from what was set, or the error queue holds
    /// something.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task<TrainSettings> Program(Permit permit, TrainSettings train, CancellationToken cancel);

    /// <summary>Asks back every setting that this program made and that still stands. Changes nothing.</summary>
    /// <exception cref="SettingChangedException">One is another than was set: somebody else controls the
    /// instrument, or it was switched off and on. Nothing is put right.</exception>
    /// <exception cref="InstrumentException">A reading is no number.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task CheckSettings(CancellationToken cancel);

    /// <summary>Reads the widths back once more, arms, and checks that the pulser waits for its trigger.</summary>
    /// <inheritdoc cref="Program" path="/exception"/>
    Task Arm(Permit permit, CancellationToken cancel);

    /// <summary>Fires one train and checks by the pulser's own count that exactly one was fired. Never repeated by
    /// itself.</summary>
    /// <inheritdoc cref="Program" path="/exception"/>
    Task Fire(Permit permit, CancellationToken cancel);

    /// <summary>Inhibits pulses; the off bias of the gates stays.</summary>
    Task Inhibit(CancellationToken cancel);

    /// <summary>Trains fired since the pulser was switched on.</summary>
    Task<long> ReadCount(CancellationToken cancel);
}
