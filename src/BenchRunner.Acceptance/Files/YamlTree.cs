using System.Text;
using YamlDotNet.Core;
using YamlDotNet.Core.Events;

namespace BenchRunner.Acceptance.Files;

/// <summary>Reads the YAML of our files into nodes with places: no aliases, anchors, tags or second document.</summary>
/// <remarks>
/// Over parser events, since a ready-made tree stops at the first duplicate key, and keeps no place for a key. Never
/// throws, whatever the bytes: what the parser cannot read becomes a problem. The depth is bounded as the parser's own
/// cost grows with its square.
/// </remarks>
internal sealed class YamlTree
{
    /// <summary>Deepest nesting; our deepest file needs 5.</summary>
    public const int MaximumDepth = 32;

    /// <summary>Largest file, bytes; the largest of ours has 8 kB.</summary>
    public const int MaximumBytes = 256 * 1024;

    private const string BrokenAdvice = "check indentation, quotes and brackets here";

    private readonly string _file;
    private readonly List<Problem> _problems;
    private readonly Parser _parser;
    private bool _ended;

    private YamlTree(string text, string file, List<Problem> problems)
    {
        _file = file;
        _problems = problems;
        _parser = new Parser(new StringReader(text));
    }

    private ParsingEvent? Current => _ended ? null : _parser.Current;

    /// <summary>Reads a file.</summary>
    /// <param name="source">The file.</param>
    /// <param name="problems">Takes the mistakes found.</param>
    /// <returns>The root as far as it could be read; null where there is none.</returns>
    public static YamlNode? Read(SourceFile source, List<Problem> problems)
    {
        if (source.Bytes.Length > MaximumBytes)
        {
            problems.Add(new Problem(
                new Place(source.Path, 0, 0),
                $"the file has more than {MaximumBytes / 1024} KiB",
                "a file that a person wrote",
                "check that it is the right one"));
            return null;
        }

        return Decode(source, problems) is { } text ? new YamlTree(text, source.Path, problems).Document() : null;
    }

    private static string? Decode(SourceFile source, List<Problem> problems)
    {
        try
        {
            string text = new UTF8Encoding(false, throwOnInvalidBytes: true).GetString(source.Bytes);
            return text.StartsWith('\uFEFF') ? text[1..] : text;
        }
        catch (DecoderFallbackException wrong)
        {
            ReadOnlySpan<byte> before = source.Bytes.AsSpan(0, Math.Max(wrong.Index, 0));
            int column = Encoding.UTF8.GetCharCount(before[(before.LastIndexOf((byte)'\n') + 1)..]) + 1;
            problems.Add(new Problem(
                new Place(source.Path, before.Count((byte)'\n') + 1, column),
                "the bytes here are no UTF-8 text",
                "a text file in UTF-8",
                "save it as UTF-8"));
            return null;
        }
    }

    private YamlNode? Document()
    {
        Advance();
        Advance();
        if (Current is DocumentStart)
        {
            Advance();
        }

        if (Current is null or StreamEnd)
        {
            if (_problems.Count == 0)
            {
                Report(
                    new Place(_file, 1, 1), "the file is empty", "the keys of its kind", "write them");
            }

            return null;
        }

        YamlNode root = Node(1);
        if (Current is DocumentEnd)
        {
            Advance();
        }

        if (Current is DocumentStart second)
        {
            Report(At(second.Start), "a second document starts here", "one document a file", "move it to its own file");
        }

        return root;
    }

    private YamlNode Node(int depth)
    {
        Place where = At(Current?.Start ?? Mark.Empty);
        if (depth > MaximumDepth)
        {
            Report(where, $"the nesting is deeper than {MaximumDepth} levels", "a few levels", "take levels out");
            _ended = true;
            return new YamlBroken(where);
        }

        if (Current is AnchorAlias alias)
        {
            string name = Shown.Cut(alias.Value.Value);
            Report(where, $"the alias *{name}", "plain values, no aliases", "write the value itself");
            Advance();
            return new YamlBroken(where);
        }

        bool sound = IsPlain(where);
        YamlNode? node = Current switch
        {
            Scalar => Single(where),
            SequenceStart => Items(where, depth),
            MappingStart => Entries(where, depth),
            _ => null,
        };
        return sound && node is not null ? node : new YamlBroken(where);
    }

    private bool IsPlain(Place where)
    {
        if (Current is not NodeEvent node)
        {
            return false;
        }

        if (!node.Anchor.IsEmpty)
        {
            Report(where, $"the anchor &{Shown.Cut(node.Anchor.Value)}", "plain values, no anchors", "remove it");
        }

        if (!node.Tag.IsEmpty)
        {
            const string core = "tag:yaml.org,2002:";
            string tag = node.Tag.IsNonSpecific ? "!" : node.Tag.Value.Replace(core, "!!", StringComparison.Ordinal);
            Report(where, $"the tag {Shown.Cut(tag)}", "plain values, no tags or includes", "write the value itself");
        }

        return node.Anchor.IsEmpty && node.Tag.IsEmpty;
    }

    private YamlScalar Single(Place where)
    {
        var scalar = (Scalar)Current!;
        Advance();
        return new YamlScalar(scalar.Value, scalar.Style != ScalarStyle.Plain, where);
    }

    private YamlList Items(Place where, int depth)
    {
        Advance();
        var items = new List<YamlNode>();
        while (Current is not null and not SequenceEnd)
        {
            items.Add(Node(depth + 1));
        }

        bool isWhole = Current is not null;
        Advance();
        return new YamlList(items, isWhole, where);
    }

    private YamlMap Entries(Place where, int depth)
    {
        Advance();
        var entries = new List<YamlEntry>();
        var seen = new Dictionary<string, Place>(StringComparer.Ordinal);
        while (Current is not null and not MappingEnd)
        {
            YamlNode key = Node(depth + 1);
            if (Current is null)
            {
                break;
            }

            YamlNode value = Node(depth + 1);
            if (key is not YamlScalar name)
            {
                if (key is not YamlBroken)
                {
                    Report(key.Where, "a key that is a list or a block", "a word as key", "write a word");
                }
            }
            else if (!seen.TryAdd(name.Text, key.Where))
            {
                Place first = seen[name.Text];
                Report(
                    key.Where,
                    $"the key {Shown.Quote(name.Text)} stands here again",
                    $"each key once (first in line {first.Line})",
                    "remove one of the two");
            }
            else
            {
                entries.Add(new YamlEntry(name.Text, key.Where, value));
            }
        }

        bool isWhole = Current is not null;
        Advance();
        return new YamlMap(entries, isWhole, where);
    }

    /// <summary>Moves to the next event; the first thing that the parser cannot read ends the file.</summary>
    private void Advance()
    {
        if (_ended)
        {
            return;
        }

        try
        {
            _ended = !_parser.MoveNext();
        }
        catch (YamlException wrong)
        {
            _ended = true;
            Report(At(wrong.Start), $"no YAML ({Shown.Cut(wrong.Message, 120)})", "YAML", BrokenAdvice);
        }
        catch (Exception wrong) when (wrong is InvalidOperationException or ArgumentException
            or IndexOutOfRangeException or FormatException or OverflowException)
        {
            // The scanner's own slips on broken input; it says no place, so the last one stands.
            Mark last = _parser.Current?.End ?? Mark.Empty;
            _ended = true;
            Report(At(last), "no YAML from here on", "YAML", BrokenAdvice);
        }
    }

    private Place At(Mark mark) => new(_file, (int)mark.Line, (int)mark.Column);

    private void Report(Place where, string found, string expected, string advice) =>
        _problems.Add(new Problem(where, found, expected, advice));
}
