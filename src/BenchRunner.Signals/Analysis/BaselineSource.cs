namespace BenchRunner.Signals.Analysis;

/// <summary>Where the offset that was taken off the switch's current came from.</summary>
public enum BaselineSource
{
    /// <summary>Nowhere: neither stated, nor a part of the record in which the current rests.</summary>
    None,

    /// <summary>Stated in the settings.</summary>
    Stated,

    /// <summary>The mean before on1.</summary>
    BeforeOn1,

    /// <summary>The mean over the gap from a quarter of it on, for a record without on1.</summary>
    Gap,
}
