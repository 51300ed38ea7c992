namespace BenchRunner.Signals.Analysis;

/// <summary>The place of the device under test in the half bridge.</summary>
public enum DevicePosition
{
    /// <summary>The low switch fires, the high place freewheels.</summary>
    Low,

    /// <summary>The high switch fires, the low place freewheels: definitions are mirrored.</summary>
    High,

    /// <summary>One module fills both places; low fires.</summary>
    Both,
}
