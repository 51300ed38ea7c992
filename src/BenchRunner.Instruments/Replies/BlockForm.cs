using System.Text;

namespace BenchRunner.Instruments.Replies;

/// <summary>What stands around the blocks of a reply.</summary>
/// <param name="End">What follows the last byte.</param>
/// <param name="Before">Text before the first <c>#</c>, ASCII without it, at most 32 characters; empty: none.</param>
public sealed record BlockForm(BlockEnd End, string Before)
{
    private readonly byte[] _before = Encoding.ASCII.GetBytes(Before);

    /// <summary>By the standard.</summary>
    public static BlockForm Standard { get; } = new(BlockEnd.NewLine, "");

    /// <summary>Whether the text before the first block is whole.</summary>
    /// <param name="bytes">What has come so far.</param>
    /// <param name="start">Where the head begins.</param>
    /// <exception cref="ReplyException">Another text.</exception>
    internal bool IsBegun(ReadOnlySpan<byte> bytes, out int start)
    {
        start = _before.Length;
        var due = _before.AsSpan(0, Math.Min(start, bytes.Length));
        return bytes.StartsWith(due)
            ? bytes.Length >= start
            : throw new ReplyException(ReplyFault.BadBlockHeader, bytes);
    }
}
