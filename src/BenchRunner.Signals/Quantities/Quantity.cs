using BenchRunner.Signals.Analysis;

namespace BenchRunner.Signals.Quantities;

/// <summary>One number that is taken from a waveform.</summary>
/// <param name="Name">Name, e.g. <c>qrr</c>.</param>
/// <param name="Unit">SI unit; <c>1</c> for a ratio.</param>
/// <param name="Owner">What it says something about.</param>
/// <param name="Meaning">What it means, and what can go wrong.</param>
/// <param name="Definitions">The rules that form it; the first is the default.</param>
/// <param name="IgbtDefault">ID of the default for an IGBT, where that is another one.</param>
public sealed record Quantity(
    string Name,
    string Unit,
    QuantityOwner Owner,
    string Meaning,
    IReadOnlyList<QuantityDefinition> Definitions,
    string? IgbtDefault = null)
{
    /// <summary>ID, without a route, of the definition that is taken where none is asked for.</summary>
    /// <param name="kind">Kind of the device.</param>
    public string DefaultFor(DeviceKind kind) =>
        kind == DeviceKind.Igbt ? IgbtDefault ?? Definitions[0].Id : Definitions[0].Id;

    /// <summary>The definition of an ID, with or without a route; null where the quantity has none such.</summary>
    /// <param name="id">The ID, e.g. <c>qrr/fall-10@id_low-iL</c> or <c>qrr/window-100ns</c>.</param>
    public QuantityDefinition? Find(string id)
    {
        ArgumentNullException.ThrowIfNull(id);
        (string rule, bool routed) = DefinitionId.Split(id);
        foreach (QuantityDefinition definition in Definitions)
        {
            bool same = definition.Id == rule
                || (definition.Id == DefinitionId.WindowTemplate && DefinitionId.WindowTime(rule) is not null);
            if (same && (definition.HasRoutes || !routed))
            {
                return definition;
            }
        }

        return null;
    }
}
