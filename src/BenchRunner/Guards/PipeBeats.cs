using System.Text;
using BenchRunner.Safety.Guardians;

namespace BenchRunner.Guards;

/// <summary>The runner's voice: lines of standard input, each beat answered on standard output.</summary>
internal sealed class PipeBeats(Stream input, Stream output) : IBeatSource
{
    private readonly byte[] _buffer = new byte[BeatText.LongestLine + 1];
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
        try
        {
            int count = await input.ReadAsync(_buffer.AsMemory(_length));
            _length += count;
            return count;
        }
        catch (IOException)
        {
            return 0;
        }
    }
}
