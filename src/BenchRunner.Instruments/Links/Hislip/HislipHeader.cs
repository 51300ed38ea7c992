using System.Buffers.Binary;

namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>Header of a HiSLIP message (IVI-6.1, 2.3), big-endian: <c>HS</c>, type, control code, parameter of 32 bits,
/// payload length of 64.</summary>
/// <param name="Type">What the message is.</param>
/// <param name="Control">Control code; its meaning is the type's.</param>
/// <param name="Parameter">Parameter; its meaning is the type's.</param>
/// <param name="Length">Bytes of payload that follow; at most <see cref="LongestPayload"/> where it was read.</param>
public readonly record struct HislipHeader(HislipType Type, byte Control, uint Parameter, ulong Length)
{
    /// <summary>Bytes of a header.</summary>
    public const int Size = 16;

    /// <summary>The longest payload taken: 64 MiB (house rule).</summary>
    public const ulong LongestPayload = 64 * 1024 * 1024;

    // IVI-6.1, table of message types: from here on types are a vendor's; those between are reserved.
    private const byte FirstOfVendors = 128;

    /// <summary>Why the type is unknown; null where it is known.</summary>
    public HislipFault? Unknown => Type <= HislipType.AuthenticationResult ? null
        : (byte)Type < FirstOfVendors ? HislipFault.UnrecognizedType
        : HislipFault.UnrecognizedVendorType;

    /// <summary>Reads a header.</summary>
    /// <param name="bytes">What has come so far.</param>
    /// <param name="header">The header, where whole.</param>
    /// <returns>Whether it is whole; false: more must come.</returns>
    /// <exception cref="HislipException">Not one, or of a payload too long: refused before anything is
    /// allocated.</exception>
    public static bool TryRead(ReadOnlySpan<byte> bytes, out HislipHeader header)
    {
        header = default;
        var prologue = bytes[..Math.Min(bytes.Length, 2)];
        if (!"HS"u8.StartsWith(prologue))
        {
            throw new HislipException(
                HislipFault.PoorlyFormedHeader, Convert.ToHexString(bytes[..Math.Min(bytes.Length, Size)]));
        }

        if (bytes.Length < Size)
        {
            return false;
        }

        // Unsigned before all else: as a signed number 2^63 and more would pass as short.
        var length = BinaryPrimitives.ReadUInt64BigEndian(bytes[8..]);
        if (length > LongestPayload)
        {
            throw new HislipException(
                HislipFault.TooLarge, FormattableString.Invariant($"{length} bytes where {LongestPayload} are the most"));
        }

        header = new HislipHeader(
            (HislipType)bytes[2], bytes[3], BinaryPrimitives.ReadUInt32BigEndian(bytes[4..]), length);
        return true;
    }

    /// <summary>Writes the header.</summary>
    /// <param name="buffer">Where to; at least <see cref="Size"/> bytes.</param>
    public void Write(Span<byte> buffer)
    {
        "HS"u8.CopyTo(buffer);
        buffer[2] = (byte)Type;
        buffer[3] = Control;
        BinaryPrimitives.WriteUInt32BigEndian(buffer[4..], Parameter);
        BinaryPrimitives.WriteUInt64BigEndian(buffer[8..], Length);
    }
}
