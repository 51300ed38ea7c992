using System.Buffers.Binary;
using System.IO.Compression;

namespace BenchRunner.Evidence.Codecs;

/// <summary>How the ADC codes of a trace become bytes of a payload, and back bit for bit.</summary>
/// <remarks>
/// The codec's number stands beside each trace and never changes its meaning: 0 is the codes themselves, 16-bit
/// little-endian; 1 is differences of neighbours (wrapping), zigzag, all low bytes before all high bytes, then Brotli
/// (RFC 7932). The encoder takes the shorter of the two, so noise never grows.
/// </remarks>
public static class TraceCodec
{
    /// <summary>The codes themselves, 16-bit little-endian.</summary>
    public const int Plain = 0;

    /// <summary>Differences, zigzag, byte planes, Brotli.</summary>
    public const int Differences = 1;

    private const int BrotliQuality = 1;
    private const int BrotliWindow = 18;

    /// <summary>Encodes codes in the shortest form known.</summary>
    /// <param name="codes">The ADC codes; not modified.</param>
    /// <returns>The codec's number and the bytes.</returns>
    public static (int Codec, byte[] Bytes) Encode(ReadOnlySpan<short> codes)
    {
        byte[] planes = new byte[2 * codes.Length];
        int before = 0;
        for (int i = 0; i < codes.Length; i++)
        {
            short difference = unchecked((short)(codes[i] - before));
            int zigzag = (difference << 1) ^ (difference >> 15);
            planes[i] = (byte)zigzag;
            planes[codes.Length + i] = (byte)(zigzag >> 8);
            before = codes[i];
        }

        byte[] packed = new byte[planes.Length];
        bool shorter = BrotliEncoder.TryCompress(planes, packed, out int written, BrotliQuality, BrotliWindow);
        return shorter && written < packed.Length ? (Differences, packed[..written]) : (Plain, Bytes(codes));
    }

    /// <summary>Decodes the bytes of a trace.</summary>
    /// <param name="codec">The codec's number.</param>
    /// <param name="bytes">The bytes; not modified.</param>
    /// <param name="samples">How many codes they hold.</param>
    /// <returns>The codes that were encoded.</returns>
    /// <exception cref="EvidenceException">The codec is not known, or the bytes are not what it makes.</exception>
    public static short[] Decode(int codec, ReadOnlySpan<byte> bytes, int samples)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(samples);
        return codec switch
        {
            Plain => FromPlain(bytes, samples),
            Differences => FromDifferences(bytes, samples),
            _ => throw new EvidenceException($"trace codec {codec} is not known; use the program that wrote the file."),
        };
    }

    /// <summary>Codes as 16-bit little-endian bytes: the form of codec 0, and what a trace's SHA-256 is taken
    /// over.</summary>
    public static byte[] Bytes(ReadOnlySpan<short> codes)
    {
        byte[] bytes = new byte[2 * codes.Length];
        for (int i = 0; i < codes.Length; i++)
        {
            BinaryPrimitives.WriteInt16LittleEndian(bytes.AsSpan(2 * i), codes[i]);
        }

        return bytes;
    }

    private static short[] FromPlain(ReadOnlySpan<byte> bytes, int samples)
    {
        if (bytes.Length != 2L * samples)
        {
            throw Damaged();
        }

        short[] codes = new short[samples];
        for (int i = 0; i < samples; i++)
        {
            codes[i] = BinaryPrimitives.ReadInt16LittleEndian(bytes[(2 * i)..]);
        }

        return codes;
    }

    private static short[] FromDifferences(ReadOnlySpan<byte> bytes, int samples)
    {
        byte[] planes = new byte[checked(2 * samples)];
        if (!BrotliDecoder.TryDecompress(bytes, planes, out int written) || written != planes.Length)
        {
            throw Damaged();
        }

        short[] codes = new short[samples];
        int before = 0;
        for (int i = 0; i < samples; i++)
        {
            int zigzag = planes[i] | (planes[samples + i] << 8);
            before = unchecked((short)(before + ((zigzag >> 1) ^ -(zigzag & 1))));
            codes[i] = (short)before;
        }

        return codes;
    }

    private static EvidenceException Damaged() => new("a trace is damaged: its bytes are not what its codec makes.");
}
