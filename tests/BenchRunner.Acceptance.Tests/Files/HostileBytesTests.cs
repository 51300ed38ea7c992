using System.Text;
using CsCheck;

namespace BenchRunner.Acceptance.Tests.Files;

/// <summary>Whatever the bytes, a reader answers: a model or problems with places, never an exception.</summary>
public sealed class HostileBytesTests
{
    private static readonly string[] _scraps =
    [
        "{", "}", "[", "]", ":", ": ", "- ", "? ", "'", "\"", "|", ">", "&a ", "*a", "!!str ", "!x ", "%YAML 1.2\n",
        "---\n", "...\n", "\t", "\n", "\r", "\0", "\uFEFF", "\u202E", "#", ",", "<<: ", "\\", "~", "\u2028",
        "format: 1\n",
    ];

    [Fact]
    public void Mutated_files_never_throw() =>
        Gen.Select(Gen.Int[0, Examples.All.Length - 1], Edit.Array[1, 6]).Sample((file, edits) =>
        {
            (string kind, string text) = Examples.All[file];
            byte[] bytes = edits.Aggregate(Encoding.UTF8.GetBytes(text), (so, edit) => edit(so));
            Readers.Problems(Readers.Source(kind + ".yaml", bytes));
        });

    [Fact]
    [Trait("kind", "slow")]
    public void Very_many_mutated_files_never_throw() =>
        Gen.Select(Gen.Int[0, Examples.All.Length - 1], Edit.Array[1, 6]).Sample(
            (file, edits) =>
            {
                (string kind, string text) = Examples.All[file];
                byte[] bytes = edits.Aggregate(Encoding.UTF8.GetBytes(text), (so, edit) => edit(so));
                Readers.Problems(Readers.Source(kind + ".yaml", bytes));
            },
            iter: 20_000);

    [Fact]
    public void Random_bytes_never_throw() =>
        Gen.Select(Gen.Int[0, Examples.All.Length - 1], Gen.Byte.Array[0, 300]).Sample((file, bytes) =>
            Readers.Problems(Readers.Source(Examples.All[file].Kind + ".yaml", bytes)));

    [Fact]
    public void Scraps_of_syntax_never_throw() =>
        Scrap.Array[1, 30].Sample(scraps =>
            Readers.Problems(Readers.Source("sequence.yaml", "format: 1\n" + string.Concat(scraps))));

    [Theory]
    [InlineData("[")]
    [InlineData("{a: ")]
    [InlineData("- ")]
    [InlineData("? ")]
    [InlineData("&a [")]
    public void Endless_nesting_ends_at_the_bound(string opening)
    {
        string text = "format: 1\nsequence: " + string.Concat(Enumerable.Repeat(opening, 200_000 / opening.Length));
        Assert.NotEmpty(Readers.Problems(Readers.Source("sequence.yaml", text)));
    }

    [Theory]
    [InlineData("(.{999}){999}")]
    [InlineData("((((a{99}){99}){99}){99}){99}")]
    [InlineData("(?<=a)b")]
    [InlineData("a)(b")]
    [InlineData("[")]
    public void An_expression_that_is_none_or_enormous_is_refused(string pattern)
    {
        string text = Examples.Sequence.With("W1200-[0-9]{4}", pattern);
        Assert.Single(Readers.Problems(Readers.Source("sequence.yaml", text)));
    }

    [Fact]
    public void Every_cut_of_a_file_gives_a_place()
    {
        byte[] whole = Encoding.UTF8.GetBytes(Examples.Bench);
        for (int length = 0; length < whole.Length - 20; length += 7)
        {
            var problems = Readers.Problems(Readers.Source("bench.yaml", whole[..length]));
            Assert.All(problems, problem =>
                Assert.True(problem.Where is { Line: > 0, Column: > 0 }, problem.ToString()));
        }
    }

    private static Gen<string> Scrap => Gen.Int[0, _scraps.Length - 1].Select(i => _scraps[i]);

    private static Gen<Func<byte[], byte[]>> Edit =>
        Gen.Select(Gen.Int[0, 4], Gen.Double.Unit, Gen.Byte, Scrap)
        .Select((kind, where, value, scrap) => new Func<byte[], byte[]>(bytes =>
        {
            int at = (int)(where * bytes.Length);
            return kind switch
            {
                0 => [.. bytes[..at], value, .. bytes[at..]],
                1 => [.. bytes[..at], .. Encoding.UTF8.GetBytes(scrap), .. bytes[at..]],
                2 => [.. bytes[..at], .. bytes[Math.Min(bytes.Length, at + 1 + value % 20)..]],
                3 => [.. bytes[..at], .. bytes[(at / 2)..]],
                _ => bytes[..at],
            };
        }));
}
