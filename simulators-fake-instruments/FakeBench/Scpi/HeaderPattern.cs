using System.Globalization;

namespace FakeBench.Scpi;

/// <summary>A header as a manual writes it: <c>[SOURce:]VOLTage[:LEVel]</c>, <c>OUTPut&lt;1|2&gt;[:STATe]?</c>,
/// <c>*IDN?</c>.</summary>
/// <remarks>Source: SCPI-1999 volume 1, 5.1 and 6.2.</remarks>
public sealed class HeaderPattern
{
    private readonly string? _common;
    private readonly List<HeaderNode> _nodes = [];

    /// <summary>Reads a pattern.</summary>
    public HeaderPattern(string pattern)
    {
        ArgumentException.ThrowIfNullOrEmpty(pattern);
        IsQuery = pattern[^1] == '?';
        string body = IsQuery ? pattern[..^1] : pattern;
        if (body[0] == '*')
        {
            _common = body;
            return;
        }

        bool optional = false;
        foreach (string part in body.Replace("[", ":[:", StringComparison.Ordinal)
            .Replace("]", ":]:", StringComparison.Ordinal).Split(':', StringSplitOptions.RemoveEmptyEntries))
        {
            if (part is "[" or "]")
            {
                optional = part == "[";
            }
            else
            {
                _nodes.Add(Node(part, optional));
            }
        }
    }

    /// <summary>Whether it asks.</summary>
    public bool IsQuery { get; }

    /// <summary>Compares a whole header, from the root, e.g. <c>:SYST:ERR?</c>.</summary>
    /// <param name="header">The header; white space is no part of one.</param>
    /// <param name="suffixes">Suffixes of the nodes that have any to choose from, in order; 1 where none was
    /// written.</param>
    public HeaderMatch Match(string header, out IReadOnlyList<int> suffixes)
    {
        suffixes = [];
        bool asks = header.EndsWith('?');
        string body = asks ? header[..^1] : header;
        if (asks != IsQuery || body.Length == 0)
        {
            return HeaderMatch.None;
        }

        if (_common is not null)
        {
            return body.Equals(_common, StringComparison.OrdinalIgnoreCase) ? HeaderMatch.Match : HeaderMatch.None;
        }

        string[] written = (body[0] == ':' ? body[1..] : body).Split(':');
        var found = new List<int>();
        HeaderMatch match = Walk(written, 0, 0, found);
        suffixes = found;
        return match;
    }

    private static HeaderNode Node(string part, bool optional)
    {
        int open = part.IndexOf('<', StringComparison.Ordinal);
        if (open < 0)
        {
            return new HeaderNode(part, optional, []);
        }

        int[] suffixes = [.. part[(open + 1)..^1].Split('|').Select(s => int.Parse(s, CultureInfo.InvariantCulture))];
        return new HeaderNode(part[..open], optional, suffixes);
    }

    private HeaderMatch Walk(string[] written, int at, int node, List<int> suffixes)
    {
        if (node == _nodes.Count)
        {
            return at == written.Length ? HeaderMatch.Match : HeaderMatch.None;
        }

        HeaderNode next = _nodes[node];
        HeaderMatch best = HeaderMatch.None;
        int before = suffixes.Count;
        if (at < written.Length)
        {
            HeaderMatch here = next.Compare(written[at], out int suffix);
            if (here != HeaderMatch.None)
            {
                Remember(next, suffix, suffixes);
                HeaderMatch rest = Walk(written, at + 1, node + 1, suffixes);
                best = (HeaderMatch)Math.Min((int)here, (int)rest);
                if (best == HeaderMatch.Match)
                {
                    return best;
                }
            }
        }

        if (next.Optional)
        {
            suffixes.RemoveRange(before, suffixes.Count - before);
            Remember(next, 1, suffixes);
            HeaderMatch without = Walk(written, at, node + 1, suffixes);
            best = (HeaderMatch)Math.Max((int)best, (int)without);
        }

        return best;
    }

    private static void Remember(HeaderNode node, int suffix, List<int> suffixes)
    {
        if (node.Suffixes.Count > 0)
        {
            suffixes.Add(suffix);
        }
    }
}
