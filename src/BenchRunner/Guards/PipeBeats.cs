using System.Text;
using System.Threading.Channels;
using BenchRunner.Safety.Guardians;

namespace BenchRunner.Guards;

/// <summary>The runner's voice: lines of standard input, each beat answered on standard output.</summary>
/// <remarks>Reading waits on a thread of its own: on a small computer the pool's few threads are for what makes the bench
/// safe.</remarks>
internal sealed class PipeBeats(Stream input, Stream output) : IBeatSource
{
    private readonly byte[] _buffer = new byte[BeatText.LongestLine + 1];
    private readonly Channel<byte[]> _arrived = Channel.CreateBounded<byte[]>(16);
    private ReadOnlyMemory<byte> _rest;
    private Thread? _reading;
    private int _length;
    private long _due = 1;
    private bool _over;

    /// <inheritdoc/>
    public async Task<Heard> Next()
    {
        if (await Line() is not { } line)
        {
            return new Heard(HeardKind.Ended);
        }

        Heard heard = BeatText.Read(line, _due);
        if (heard.Kind != HeardKind.Malformed)
        {
            Say($"{BeatText.Answer} {_due++}");
        }

        return heard;
    }

    /// <summary>The next line; null: the pipe has closed. What is longer than any beat comes cut.</summary>
    public async Task<string?> Line()
    {
        while (true)
        {
            int end = Array.IndexOf(_buffer, (byte)'\n', 0, _length);
            int taken = end >= 0 ? end + 1 : _length == _buffer.Length ? _length : 0;
            if (taken > 0)
            {
                string line = Encoding.UTF8.GetString(_buffer, 0, end >= 0 ? end : taken);
                _buffer.AsSpan(taken, _length - taken).CopyTo(_buffer);
                _length -= taken;
                return line;
            }

            if (_over || await Read() == 0)
            {
                // Half a line before the end is no line.
                _over = true;
                return null;
            }
        }
    }

    /// <summary>Says a line to the runner; that nobody is there to hear it shows where its voice ends.</summary>
    public void Say(string line)
    {
        try
        {
            output.Write(Encoding.UTF8.GetBytes(line + "\n"));
            output.Flush();
        }
        catch (IOException)
        {
            // The pipe's other side has gone: reading says so next.
        }
    }

    private async Task<int> Read()
    {
        if (_reading is null)
        {
            _reading = new Thread(Listen) { IsBackground = true, Name = "beats" };
            _reading.Start();
        }

        if (_rest.IsEmpty && await _arrived.Reader.WaitToReadAsync())
        {
            _rest = await _arrived.Reader.ReadAsync();
        }

        int count = Math.Min(_rest.Length, _buffer.Length - _length);
        _rest[..count].CopyTo(_buffer.AsMemory(_length));
        _rest = _rest[count..];
        _length += count;
        return count;
    }

    private void Listen()
    {
        byte[] buffer = new byte[BeatText.LongestLine];
        try
        {
            while (input.Read(buffer) is > 0 and int count)
            {
                _arrived.Writer.WriteAsync(buffer[..count]).AsTask().Wait();
            }
        }
        catch (Exception)
        {
            // Whatever it is: nothing more is heard, as where the pipe ends.
        }

        _arrived.Writer.Complete();
    }
}
