namespace FakeBench.Scpi;

/// <summary>Reads one program message, unit by unit, and walks the command tree's paths.</summary>
/// <remarks>
/// Source: IEEE 488.2, 7.3 to 7.6; SCPI-1999 volume 1, 6.2.4: a unit starts at the parent of the last node as written,
/// a colon goes to the root, a common command moves nothing.
/// </remarks>
/// <param name="message">The message without its terminator; each character is one byte.</param>
public sealed class ProgramMessage(string message)
{
    private const int LongestMnemonic = 12;
    private readonly DataReader _data = new(message);
    private int _at;
    private string _path = "";

    /// <summary>Reads the next unit.</summary>
    /// <returns>The unit; null at the end.</returns>
    /// <exception cref="ScpiException">The rest of the message cannot be told apart and must be dropped.</exception>
    public ProgramUnit? Next()
    {
        while (true)
        {
            _at = _data.SkipSpace(_at);
            if (_at >= message.Length)
            {
                return null;
            }

            if (message[_at] != ';')
            {
                break;
            }

            _at++;
        }

        string header = ReadHeader();
        var data = new List<ProgramData>();
        _at = _data.SkipSpace(_at);
        while (_at < message.Length && message[_at] != ';')
        {
            data.Add(_data.Read(ref _at));
            _at = _data.SkipSpace(_at);
            if (_at >= message.Length || message[_at] == ';')
            {
                break;
            }

            if (message[_at] != ',')
            {
                throw new ScpiException(-103, message[_at..]);
            }

            _at = _data.SkipSpace(_at + 1);
            if (_at >= message.Length || message[_at] == ';')
            {
                throw new ScpiException(-109, "after the last comma");
            }
        }

        return new ProgramUnit(header, data);
    }

    private string ReadHeader()
    {
        int start = _at;
        while (_at < message.Length && message[_at] > ' ' && message[_at] != ';')
        {
            if (message[_at] > '~')
            {
                throw new ScpiException(-101);
            }

            _at++;
        }

        string written = message[start.._at];
        if (written.TrimEnd('?').Split(':', '*').Any(node => node.Length > LongestMnemonic))
        {
            throw new ScpiException(-112, written);
        }

        if (written[0] == '*')
        {
            return written;
        }

        string whole = written[0] == ':' || _path.Length == 0 ? written : $"{_path}:{written}";
        string rooted = whole[0] == ':' && !whole.StartsWith(":*", StringComparison.Ordinal) ? whole[1..] : whole;
        int last = rooted.LastIndexOf(':');
        _path = last < 0 ? "" : rooted[..last];
        return rooted;
    }
}
