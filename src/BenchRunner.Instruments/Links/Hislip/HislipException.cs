namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>A HiSLIP message that ends the connection.</summary>
/// <remarks>Not to be confused with <see cref="LinkException"/>, which the link makes of it and which names the
/// instrument.</remarks>
/// <param name="fault">What is wrong.</param>
/// <param name="found">What came.</param>
public sealed class HislipException(HislipFault fault, string found) : Exception($"{Words(fault)}: {found}")
{
    /// <summary>What is wrong.</summary>
    public HislipFault Fault { get; } = fault;

    private static string Words(HislipFault fault) => fault switch
    {
        HislipFault.PoorlyFormedHeader => "no HiSLIP message",
        HislipFault.Truncated => "a HiSLIP message cut short",
        HislipFault.TooLarge => "a HiSLIP message longer than this program takes",
        HislipFault.UnsupportedVersion => "a version of HiSLIP that was not offered",
        HislipFault.BadPayload => "a HiSLIP payload of another length than its type has",
        HislipFault.EncryptionMandatory => "a HiSLIP server that insists on encryption, which this program does not speak",
        HislipFault.OutOfSequence => "a HiSLIP message that does not belong here now",
        HislipFault.WrongChannel => "a HiSLIP message that does not belong on its channel",
        HislipFault.UnrecognizedType or HislipFault.UnrecognizedVendorType => "a HiSLIP message of an unknown type",
        HislipFault.StaleMessage => "a HiSLIP message that answers nothing asked now",
        HislipFault.Discarded => "a HiSLIP message that came while the device was cleared",
        _ => throw new System.Diagnostics.UnreachableException(),
    };
}
