using BenchRunner.Signals.Quantities;

namespace BenchRunner.Tests.Documents;

public sealed class QuantitiesDocumentTests
{
    /// <summary>Made again by: <c>benchrunner quantities --markdown &gt; docs/quantities.md</c>.</summary>
    [Fact]
    public void The_document_is_what_the_catalogue_says() =>
        Assert.Equal(QuantityCatalogue.ToMarkdown(), File.ReadAllText(Repository.File("docs", "quantities.md")));
}
