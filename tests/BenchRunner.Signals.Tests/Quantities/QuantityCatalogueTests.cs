using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Signals.Tests.Quantities;

public sealed class QuantityCatalogueTests
{
    [Fact]
    public void Names_are_unique_and_each_quantity_has_a_default_of_its_own_for_each_kind()
    {
        Assert.Equal(QuantityCatalogue.All.Count, QuantityCatalogue.All.Select(q => q.Name).Distinct().Count());
        Assert.All(QuantityCatalogue.All, q =>
        {
            Assert.All(
                Enum.GetValues<DeviceKind>(),
                kind => Assert.True(QuantityCatalogue.IsKnown(q.Name, q.DefaultFor(kind))));
            Assert.Equal(q.Definitions.Count, q.Definitions.Select(d => d.Id).Distinct().Count());
        });
    }

    [Theory]
    [InlineData("qrr", "qrr/chord-90-25", true)]
    [InlineData("qrr", "qrr/fall-10@id_low-iL", true)]
    [InlineData("qrr", "qrr/window-100ns", true)]
    [InlineData("qrr", "qrr/window-2.5ns@id_low-iL", true)]
    [InlineData("qrr", "qrr/window-ns", false)]
    [InlineData("qrr", "qrr/window--5ns", false)]
    [InlineData("qrr", "trr/fall-10", false)]
    [InlineData("eon", "e/10-10", true)]
    [InlineData("eon", "e/10-10@id_low-iL", false)]
    [InlineData("nothing", "e/10-10", false)]
    public void A_definition_is_known_by_its_id(string quantity, string definition, bool known) =>
        Assert.Equal(known, QuantityCatalogue.IsKnown(quantity, definition));

    [Fact]
    public void An_igbt_has_definitions_by_its_current()
    {
        Assert.Equal("mos/90-10", QuantityCatalogue.Find("tr")!.DefaultFor(DeviceKind.Mosfet));
        Assert.Equal("igbt/10-90", QuantityCatalogue.Find("tr")!.DefaultFor(DeviceKind.Igbt));
        Assert.Equal("e/10-2", QuantityCatalogue.Find("eoff")!.DefaultFor(DeviceKind.Igbt));
    }

    [Fact]
    public void An_integration_time_is_written_in_nanoseconds_and_read_back()
    {
        Assert.Equal("qrr/window-100ns", DefinitionId.Window(100e-9));
        Assert.Equal(1, DefinitionId.WindowTime("qrr/window-100ns")!.Value / 100e-9, 12);
    }

    [Fact]
    public void Each_quantity_says_what_it_means_and_what_can_go_wrong() => Assert.All(QuantityCatalogue.All, q =>
    {
        int sentences = q.Meaning.Count(c => c is '.' or ';' or ':');
        Assert.True(sentences >= 2 && q.Meaning.EndsWith('.'), $"{q.Name}: {q.Meaning}");
    });

    [Theory]
    [InlineData("irm")]
    [InlineData("qrr")]
    [InlineData("err")]
    [InlineData("eoff")]
    public void What_holds_the_output_capacitances_charge_says_so(string quantity) =>
        Assert.Contains("output capacitance", QuantityCatalogue.Find(quantity)!.Meaning, StringComparison.Ordinal);

    [Fact]
    public void The_document_names_every_quantity_and_definition()
    {
        string document = QuantityCatalogue.ToMarkdown();
        Assert.All(QuantityCatalogue.All, q =>
        {
            Assert.Contains($"### {q.Name}\n", document, StringComparison.Ordinal);
            Assert.All(q.Definitions, d => Assert.Contains($"| `{d.Id}`", document, StringComparison.Ordinal));
        });
        Assert.DoesNotContain("\r", document, StringComparison.Ordinal);
    }
}
