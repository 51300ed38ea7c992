using System.Security.Cryptography;

namespace BenchRunner.Acceptance.Files;

/// <summary>The exact bytes of a file that was read, stored with the run.</summary>
/// <param name="Role">What it is to the run: <c>sequence</c>, <c>bench</c>, <c>dialect</c>.</param>
/// <param name="Path">The path as the user named it.</param>
/// <param name="Bytes">The exact bytes; never modified.</param>
public sealed record SourceFile(string Role, string Path, byte[] Bytes)
{
    /// <summary>SHA-256 of the bytes, lower-case hexadecimal.</summary>
    public string Sha256 { get; } = Convert.ToHexStringLower(SHA256.HashData(Bytes));
}
