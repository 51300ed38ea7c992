namespace BenchRunner.Instruments.Roles;

/// <summary>The digitiser that records one pulse train on several channels.</summary>
public interface IScope
{
    /// <summary>What the instrument said it is.</summary>
    InstrumentIdentity Identity { get; }

    /// <summary>Whether the scope can degauss a current clamp on one of its inputs; where not, a person does.</summary>
    bool CanDegauss { get; }

    /// <summary>Sets time base, trigger, attenuations and ranges and asks each back. Settings that stand already are
    /// not sent again.</summary>
    /// <exception cref="SettingChangedException">What this program had set before is not what stands now; nothing was
    /// overwritten.</exception>
    /// <exception cref="InstrumentException">A read-back differs by more than 1 %, or the error queue holds
    /// something.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task Configure(ScopeSettings settings, CancellationToken cancel);

    /// <summary>Asks back every setting that this program made and that still stands. Changes nothing.</summary>
    /// <exception cref="SettingChangedException">One is another than was set: somebody else controls the
    /// instrument, or it was switched off and on. Nothing is put right.</exception>
    /// <exception cref="InstrumentException">A reading is no number.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task CheckSettings(CancellationToken cancel);

    /// <summary>Asks every stated attenuation back, starts an acquisition and waits until the scope says that it waits
    /// for its trigger.</summary>
    /// <exception cref="SettingChangedException">An attenuation is another than was set; nothing was
    /// started.</exception>
    Task Arm(CancellationToken cancel);

    /// <summary>Triggers an armed scope at once, so that it records without a pulse train.</summary>
    Task Trigger(CancellationToken cancel);

    /// <summary>Waits until the acquisition is complete; aborts it at the deadline.</summary>
    Task<AcquisitionEnd> WaitForRecord(TimeSpan deadline, CancellationToken cancel);

    /// <summary>Acquisitions completed since the scope was switched on.</summary>
    Task<long> ReadCount(CancellationToken cancel);

    /// <summary>Reads preamble and codes of every channel of the settings in force, in one stopped state.</summary>
    Task<ScopeRecord> Read(CancellationToken cancel);

    /// <summary>Ends a waiting acquisition.</summary>
    Task Abort(CancellationToken cancel);

    /// <summary>Degausses the clamp on an input. The conductor must carry no current.</summary>
    /// <param name="input">The scope's own channel number, from 1.</param>
    /// <param name="cancel">Ends the exchange; whether the clamp was degaussed is then unknown.</param>
    /// <exception cref="InvalidOperationException"><see cref="CanDegauss"/> is false: a caller's mistake.</exception>
    Task Degauss(int input, CancellationToken cancel);
}
