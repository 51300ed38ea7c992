using System.Security.Cryptography;
using BenchRunner.Evidence.Codecs;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Evidence.Captures;

/// <summary>The encoded traces of one capture behind each other, with the directory that finds them again.</summary>
/// <param name="Bytes">All traces' bytes.</param>
/// <param name="Sha256">SHA-256 of the bytes, lower-case hexadecimal.</param>
/// <param name="Directory">Where each trace lies.</param>
internal sealed record Payload(byte[] Bytes, string Sha256, IReadOnlyList<PayloadEntry> Directory)
{
    /// <summary>Encodes traces.</summary>
    public static Payload Of(IReadOnlyList<RawTrace> traces)
    {
        List<PayloadEntry> directory = [];
        List<byte[]> parts = [];
        int offset = 0;
        foreach (RawTrace trace in traces)
        {
            (int codec, byte[] bytes) = TraceCodec.Encode(trace.Codes);
            string sha256 = Convert.ToHexStringLower(SHA256.HashData(TraceCodec.Bytes(trace.Codes)));
            directory.Add(new PayloadEntry(trace, offset, bytes.Length, codec, sha256));
            parts.Add(bytes);
            offset += bytes.Length;
        }

        byte[] whole = new byte[offset];
        for (int i = 0; i < parts.Count; i++)
        {
            parts[i].CopyTo(whole, directory[i].Offset);
        }

        return new Payload(whole, Convert.ToHexStringLower(SHA256.HashData(whole)), directory);
    }
}
