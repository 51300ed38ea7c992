using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>A value with its unit in one text, e.g. <c>400 V</c>; a ratio is a plain number or in %.</summary>
/// <param name="Meaning">What it means.</param>
/// <param name="Unit">The SI unit wanted; <c>1</c> for a ratio.</param>
/// <param name="Range">The range.</param>
/// <param name="Sample">A value as it might be written.</param>
/// <param name="Word">A word that may stand in place of a value (<c>ambient</c>); null: none.</param>
internal sealed record QuantityShape(string Meaning, string Unit, Bounds Range, string Sample, string? Word = null)
    : Shape(Meaning)
{
    /// <inheritdoc/>
    public override string Expected =>
        UnitText.NameOf(Unit) + Range.Words(Sample.EndsWith('%') ? "%" : Unit) + (Word is null ? "" : $", or {Word}");

    /// <inheritdoc/>
    public override string Example => Sample;

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        if (node is YamlScalar word && word.Text == Word)
        {
            return Word;
        }

        if (node is YamlScalar scalar
            && SiText.TryParse(scalar.Text, out double value, out string unit)
            && unit == Unit)
        {
            if (Range.Hold(value))
            {
                return value;
            }

            problems.Add(new Problem(
                node.Where, $"{label} is {Shown.Cut(scalar.Text)}", Expected, $"change the value, e.g. to {Example}"));
            return null;
        }

        Refuse(node, label, problems);
        return null;
    }

    /// <inheritdoc/>
    public override JsonObject Schema()
    {
        if (Unit == "1")
        {
            return new JsonObject
            {
                ["anyOf"] = new JsonArray(
                    new JsonObject { ["type"] = "number" },
                    new JsonObject { ["type"] = "string", ["pattern"] = Pattern("%") }),
            };
        }

        string pattern = Pattern(Unit switch
        {
            "degC" => "(degC|°C)",
            "Ohm" => "[fpnuµμmkMGT]?(Ohm|Ω|Ω)",
            "V/s" => "[fpnuµμmkMGT]?V/[fpnuµμmkMGT]?s",
            "A/s" => "[fpnuµμmkMGT]?A/[fpnuµμmkMGT]?s",
            _ => $"[fpnuµμmkMGT]?{Unit}",
        });
        return new JsonObject
        {
            ["type"] = "string",
            ["pattern"] = Word is null ? pattern : $"{pattern}|^{Word}$",
            ["examples"] = new JsonArray(Example),
        };
    }

    /// <inheritdoc/>
    protected override string Advice(YamlNode node) => node switch
    {
        YamlScalar { Text: var text } when text.Contains(',') => $"write a decimal point, e.g. {Example}",
        YamlScalar { Text: var text } when Unit != "1" && SiText.TryParse(text, out _, out string unit)
            && unit == "1" =>
            $"add the unit {Unit}, e.g. {Example}",
        _ => Unit == "1" ? $"give a number or a percentage, e.g. {Example}" : $"give it in {Unit}, e.g. {Example}",
    };

    private static string Pattern(string unit) => $"^[+-]?([0-9]+(\\.[0-9]*)?|\\.[0-9]+)([eE][+-]?[0-9]+)? *{unit}$";
}
