using System.CommandLine;
using BenchRunner.Json;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Commands;

/// <summary><c>quantities</c>: what every quantity and definition means, from the catalogue that limits and reports
/// use.</summary>
internal static class QuantitiesCommand
{
    public static Command Build()
    {
        var name = new Argument<string?>("name")
        {
            Description = "one quantity, e.g. qrr",
            DefaultValueFactory = _ => null,
        };
        var markdown = new Option<bool>("--markdown") { Description = "the whole catalogue as a document" };
        Option<bool> json = CommonOptions.Json();
        var command = new Command(
            "quantities", "what every quantity and definition ID means\n"
                + "Example: benchrunner quantities qrr") { name, markdown, json };
        command.SetAction(parsed =>
        {
            IReadOnlyList<Quantity> chosen = Choose(parsed.GetValue(name));
            if (parsed.GetValue(json))
            {
                CatalogueJson.Write(chosen);
            }
            else if (parsed.GetValue(markdown))
            {
                System.Console.Write(QuantityCatalogue.ToMarkdown());
            }
            else
            {
                Print(chosen, whole: parsed.GetValue(name) is not null);
            }

            return ExitCode.Done;
        });
        return command;
    }

    private static IReadOnlyList<Quantity> Choose(string? name) => name is null
        ? QuantityCatalogue.All
        : QuantityCatalogue.Find(name) is { } found
            ? [found]
            : throw new InputException($"there is no quantity '{name}'; 'benchrunner quantities' lists all of them");

    private static void Print(IReadOnlyList<Quantity> quantities, bool whole)
    {
        foreach (Quantity quantity in quantities)
        {
            string unit = quantity.Unit == "1" ? "" : $" [{quantity.Unit}]";
            System.Console.WriteLine($"{quantity.Name}{unit}  {quantity.DefaultFor(DeviceKind.Mosfet)}");
            System.Console.WriteLine($"    {quantity.Meaning}");
            foreach (QuantityDefinition definition in whole ? quantity.Definitions : [])
            {
                System.Console.WriteLine($"    {definition.Id}: {definition.Rule}");
            }
        }
    }
}
