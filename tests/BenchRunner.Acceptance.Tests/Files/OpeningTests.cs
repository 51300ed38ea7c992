using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Tests.Files;

public sealed class OpeningTests
{
    [Theory]
    [InlineData("there-is-none.yaml")]
    [InlineData("no-folder/there-is-none.yaml")]
    [InlineData("")]
    [InlineData("nul\0name.yaml")]
    public void A_file_that_cannot_be_opened_is_one_problem(string path)
    {
        Problem problem = Assert.Single(SequenceFile.Read(path).Problems);
        Assert.DoesNotContain('\0', problem.ToString());
        Assert.Equal(0, problem.Where.Line);
    }

    [Fact]
    public void A_missing_file_is_said_to_be_missing() => Assert.Equal(
        "there-is-none.yaml: there is no such file; expected a bench file; check the path.",
        Assert.Single(BenchFile.Read("there-is-none.yaml").Problems).ToString());

    [Fact]
    public void A_folder_is_no_file()
    {
        Problem problem = Assert.Single(SequenceFile.Read(Repository.PathOf("sequences")).Problems);
        Assert.Contains("folder", problem.Found, StringComparison.Ordinal);
    }

    [Fact]
    public void A_file_of_more_than_256_KiB_is_refused_before_it_is_read_as_YAML()
    {
        SourceFile source = Readers.Source("sequence.yaml", Examples.Sequence + new string('#', 300_000));
        Assert.Contains("256 KiB", Assert.Single(Readers.Problems(source)).Found, StringComparison.Ordinal);
    }

    [Fact]
    public void The_bytes_of_the_file_come_with_the_model()
    {
        Sequence sequence = SequenceFile.Read(Repository.SequencePath).Value!;
        Assert.Equal(File.ReadAllBytes(Repository.SequencePath), sequence.Source.Bytes);
        Assert.Equal("sequence", sequence.Source.Role);
        Assert.Equal(Repository.SequencePath, sequence.Source.Path);
    }

    [Theory]
    [InlineData("\uFEFF")]
    [InlineData("# a comment\n")]
    [InlineData("---\n")]
    public void A_byte_order_mark_a_comment_or_a_document_start_may_come_first(string start) =>
        Assert.Empty(Readers.Problems(Readers.Source("sequence.yaml", start + Examples.Sequence)));

    [Fact]
    public void Lines_may_end_as_on_Windows() =>
        Assert.Empty(Readers.Problems(Readers.Source("bench.yaml", Examples.Bench.With("\n", "\r\n"))));
}
