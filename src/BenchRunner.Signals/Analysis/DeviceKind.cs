namespace BenchRunner.Signals.Analysis;

/// <summary>The kind of the device under test: it picks the default definitions.</summary>
public enum DeviceKind
{
    /// <summary>A MOSFET: IEC 60747-8 definitions (switching times by voltage).</summary>
    Mosfet,

    /// <summary>An IGBT: IEC 60747-9 definitions (switching times by current, tail in the energy).</summary>
    Igbt,

    /// <summary>A diode: it freewheels, the firing switch is its companion.</summary>
    Diode,
}
