using System.Globalization;
using System.Text;

namespace BenchRunner.Signals.Tests.Files;

/// <summary>A table of any number of rows that nobody has to store: each byte is made when it is read.</summary>
/// <remarks>Rows of one length: the time in ns, then five channels of five digits that depend on the row.</remarks>
internal sealed class RowsStream(int rows, bool canSeek) : Stream
{
    public const string Header = "t,vgs_low,vds_low,id_low,vds_high,vbus\n";

    private const int Columns = 5;
    private const int Width = 11 + (Columns * 6) + 1;

    private readonly byte[] _header = Encoding.ASCII.GetBytes(Header);
    private long _position;

    public override bool CanRead => true;

    public override bool CanSeek => canSeek;

    public override bool CanWrite => false;

    public override long Length => canSeek ? _header.Length + ((long)rows * Width) : throw new NotSupportedException();

    public override long Position
    {
        get => _position;
        set => _position = canSeek ? value : throw new NotSupportedException();
    }

    /// <summary>What a channel holds in a row.</summary>
    public static int Value(int row, int column) => (int)(((row * 7919L) + (column * 104729L)) % 100_000);

    public override int Read(byte[] buffer, int offset, int count) => Read(buffer.AsSpan(offset, count));

    public override int Read(Span<byte> buffer)
    {
        int given = 0;
        Span<byte> line = stackalloc byte[Width];
        while (given < buffer.Length)
        {
            int taken;
            if (_position < _header.Length)
            {
                taken = Math.Min(_header.Length - (int)_position, buffer.Length - given);
                _header.AsSpan((int)_position, taken).CopyTo(buffer[given..]);
            }
            else
            {
                long row = (_position - _header.Length) / Width;
                int within = (int)((_position - _header.Length) % Width);
                if (row >= rows)
                {
                    break;
                }

                Write(line, (int)row);
                taken = Math.Min(Width - within, buffer.Length - given);
                line.Slice(within, taken).CopyTo(buffer[given..]);
            }

            given += taken;
            _position += taken;
        }

        return given;
    }

    public override void Flush()
    {
        // Nothing is ever written.
    }

    public override long Seek(long offset, SeekOrigin origin) => throw new NotSupportedException();

    public override void SetLength(long value) => throw new NotSupportedException();

    public override void Write(byte[] buffer, int offset, int count) => throw new NotSupportedException();

    private static void Write(Span<byte> line, int row)
    {
        row.TryFormat(line, out int _, "D8", CultureInfo.InvariantCulture);
        "e-9"u8.CopyTo(line[8..]);
        for (int column = 0; column < Columns; column++)
        {
            Span<byte> field = line[(11 + (column * 6))..];
            field[0] = (byte)',';
            Value(row, column).TryFormat(field[1..], out int _, "D5", CultureInfo.InvariantCulture);
        }

        line[^1] = (byte)'\n';
    }
}
