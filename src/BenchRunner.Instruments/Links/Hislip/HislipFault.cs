namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>What is wrong with a HiSLIP message from the server.</summary>
public enum HislipFault
{
    /// <summary>No <c>HS</c> at its start: the stream is out of step, and the connection over.</summary>
    PoorlyFormedHeader,

    /// <summary>The stream ended inside it.</summary>
    Truncated,

    /// <summary>Longer than this program takes; judged on the header alone.</summary>
    TooLarge,

    /// <summary>A type that is reserved.</summary>
    UnrecognizedType,

    /// <summary>A type that a vendor defined.</summary>
    UnrecognizedVendorType,

    /// <summary>A type that does not belong on this channel.</summary>
    WrongChannel,

    /// <summary>A type that does not belong here now.</summary>
    OutOfSequence,

    /// <summary>Of an identifier that is not that of the last message sent.</summary>
    StaleMessage,

    /// <summary>Came while the device is being cleared.</summary>
    Discarded,

    /// <summary>A protocol version that was not offered.</summary>
    UnsupportedVersion,

    /// <summary>A payload of another length than its type has.</summary>
    BadPayload,

    /// <summary>The server wants encryption, which this program does not speak.</summary>
    EncryptionMandatory,
}
