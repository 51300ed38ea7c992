using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>Two values of one unit in a list, the lower first: <c>[39.3 MHz, 44.4 MHz]</c>.</summary>
/// <param name="Meaning">What they mean.</param>
/// <param name="Unit">The SI unit wanted.</param>
/// <param name="Range">The range of each.</param>
internal sealed record PairShape(string Meaning, string Unit, Bounds Range) : Shape(Meaning)
{
    private QuantityShape One => new("", Unit, Range, UnitText.ExampleOf(Unit));

    /// <inheritdoc/>
    public override string Expected => $"a list of two, {UnitText.NameOf(Unit)} and a higher one";

    /// <inheritdoc/>
    public override string Example => Unit switch
    {
        "V" => "[-8 V, 22 V]",
        "Hz" => "[39 MHz, 44 MHz]",
        _ => $"[{SiText.Format(1, Unit)}, {SiText.Format(2, Unit)}]",
    };

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        if (node is not YamlList { Items: [var first, var second] })
        {
            Refuse(node, label, problems);
            return null;
        }

        object? low = One.Read(first, $"the lower end of {label}", around, problems);
        object? high = One.Read(second, $"the higher end of {label}", around, problems);
        if (low is not double a || high is not double b)
        {
            return null;
        }

        if (a < b)
        {
            return (a, b);
        }

        problems.Add(new Problem(
            node.Where,
            $"{label} goes from {SiText.Format(a, Unit)} to {SiText.Format(b, Unit)}",
            "the lower value first, and two different ones",
            "swap or change them"));
        return null;
    }

    /// <inheritdoc/>
    public override JsonObject Schema() => new()
    {
        ["type"] = "array",
        ["items"] = One.Schema(),
        ["minItems"] = 2,
        ["maxItems"] = 2,
    };
}
