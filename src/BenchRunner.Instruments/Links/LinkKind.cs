namespace BenchRunner.Instruments.Links;

/// <summary>How an instrument is reached.</summary>
public enum LinkKind
{
    /// <summary>A stream socket; port 5025 is registered for SCPI.</summary>
    Tcp,

    /// <summary>A serial line, 8 data bits, no parity, one stop bit.</summary>
    Serial,

    /// <summary>HiSLIP (IVI-6.1): two stream sockets that carry messages; port 4880 is registered.</summary>
    Hislip,
}
