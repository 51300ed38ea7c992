namespace BenchRunner.Instruments.Roles;

/// <summary>The gate drivers as safety needs them: inhibited without losing their off bias, which is taken off an empty
/// bank only.</summary>
/// <remarks><see cref="ISafeable.MakeSafe"/> inhibits and leaves the off bias: a gate without it turns on by itself when
/// the voltage across its switch moves.</remarks>
public interface IGates : ISafeable
{
    /// <summary>Reads back that the driver holds both gates at the off level that was programmed.</summary>
    /// <exception cref="InstrumentException">It does not.</exception>
    /// <exception cref="InvalidOperationException">Nothing was programmed: a caller's mistake.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task CheckOffBias(CancellationToken cancel);

    /// <summary>Switches the driver's output off, once the bank is proved down, and reads it back.</summary>
    Task TakeOffBiasAway(CancellationToken cancel);
}
