namespace BenchRunner.Instruments.Links;

/// <summary>How an instrument is reached.</summary>
public enum LinkKind
{
    /// <summary>A stream socket; port 5025 is registered for SCPI.</summary>
    Tcp,

    /// <summary>A serial line, 8 data bits, no parity, one stop bit.</summary>
    Serial,
}
