namespace BenchRunner.Signals.Files;

/// <summary>A stream with the bytes that were read off its front to look at them put back. Does not close it.</summary>
internal sealed class PrefixedStream(byte[] prefix, Stream rest) : Stream
{
    private int _given;

    public override bool CanRead => true;

    public override bool CanSeek => false;

    public override bool CanWrite => false;

    public override long Length => throw new NotSupportedException();

    public override long Position
    {
        get => throw new NotSupportedException();
        set => throw new NotSupportedException();
    }

    public override int Read(byte[] buffer, int offset, int count) => Read(buffer.AsSpan(offset, count));

    public override int Read(Span<byte> buffer)
    {
        int left = Math.Min(prefix.Length - _given, buffer.Length);
        if (left == 0)
        {
            return rest.Read(buffer);
        }

        prefix.AsSpan(_given, left).CopyTo(buffer);
        _given += left;
        return left;
    }

    public override void Flush()
    {
        // Nothing is ever written.
    }

    public override long Seek(long offset, SeekOrigin origin) => throw new NotSupportedException();

    public override void SetLength(long value) => throw new NotSupportedException();

    public override void Write(byte[] buffer, int offset, int count) => throw new NotSupportedException();
}
