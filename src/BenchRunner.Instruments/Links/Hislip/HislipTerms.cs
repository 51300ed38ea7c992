namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>What a server says of itself in its InitializeResponse (IVI-6.1, 6.1).</summary>
/// <param name="Major">Protocol version, whole part.</param>
/// <param name="Minor">Protocol version, part after the dot.</param>
/// <param name="Session">Identifier of the session.</param>
/// <param name="PrefersOverlapped">Whether it starts in overlapped mode.</param>
/// <param name="EncryptionMandatory">Whether it insists on encryption.</param>
/// <param name="InitialEncryption">Whether it wants encryption to begin now.</param>
public readonly record struct HislipTerms(
    byte Major, byte Minor, ushort Session, bool PrefersOverlapped, bool EncryptionMandatory, bool InitialEncryption)
{
    /// <summary>The version offered, 1.0: whole part in the high byte.</summary>
    public const ushort Offered = 0x0100;

    /// <summary>Reads them.</summary>
    /// <param name="header">Header of the InitializeResponse.</param>
    public static HislipTerms Read(HislipHeader header) => new(
        (byte)(header.Parameter >> 24),
        (byte)(header.Parameter >> 16),
        (ushort)header.Parameter,
        (header.Control & 1) != 0,
        (header.Control & 2) != 0,
        (header.Control & 4) != 0);

    /// <summary>Refuses a server that this program cannot talk with.</summary>
    /// <exception cref="HislipException">It insists on encryption, or speaks a version that was not offered.</exception>
    public void Check()
    {
        if (EncryptionMandatory || InitialEncryption)
        {
            throw new HislipException(
                HislipFault.EncryptionMandatory, "allow unencrypted sessions at the instrument, or use another link");
        }

        // The server answers the lower of what both speak: never more than was offered.
        if (Major == 0 || (Major << 8 | Minor) > Offered)
        {
            throw new HislipException(
                HislipFault.UnsupportedVersion, FormattableString.Invariant($"{Major}.{Minor} where 1.0 was offered"));
        }
    }
}
