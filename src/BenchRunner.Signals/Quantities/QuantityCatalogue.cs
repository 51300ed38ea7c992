using System.Collections.Frozen;
using System.Text;

namespace BenchRunner.Signals.Quantities;

/// <summary>Every quantity and every definition: the one catalogue that analysis, limits, documents and reports
/// use.</summary>
/// <remarks>Under position <c>high</c> the places change roles: an ID then reads with low and high swapped.</remarks>
public static class QuantityCatalogue
{
    /// <summary>All quantities, in the order in which they are listed everywhere.</summary>
    public static IReadOnlyList<Quantity> All { get; } =
    [
        .. CircuitQuantities.All, .. SwitchQuantities.All, .. DiodeQuantities.All, .. RingQuantities.All,
    ];

    private static readonly FrozenDictionary<string, Quantity> _byName = All.ToFrozenDictionary(q => q.Name);

    /// <summary>The quantity of a name; null where there is none.</summary>
    /// <param name="name">The name, e.g. <c>qrr</c>.</param>
    public static Quantity? Find(string name) => _byName.GetValueOrDefault(name);

    /// <summary>Whether a quantity can be formed by a definition.</summary>
    /// <param name="quantity">The quantity's name.</param>
    /// <param name="definition">The definition's ID, with or without a route.</param>
    public static bool IsKnown(string quantity, string definition) => Find(quantity)?.Find(definition) is not null;

    /// <summary>The catalogue as a document.</summary>
    public static string ToMarkdown()
    {
        StringBuilder text = new();
        text.Append("# Quantities\n\n")
            .Append("Generated from the catalogue in code (`QuantityCatalogue`); do not edit.\n\n")
            .Append("Each value and each limit carries the ID of the definition that formed it; a limit for one ")
            .Append("definition is never applied to another. The first definition is the default. The route `")
            .Append(DefinitionId.LoadLineRoute)
            .Append("` at the end of an ID says that the diode's current is the switch's less the load-current line; ")
            .Append("without it, `id_high` is measured. Channels are named as if the low switch fired; with the ")
            .Append("device in position `high`, low and high change places. Values are in SI units.\n\n")
            .Append("- A quantity that cannot be formed has a reason and no value; each value has the interval (from, ")
            .Append("to) that it was formed on.\n")
            .Append("- An edge is the gate's crossing of 50 %; its departure is where the gate left its state, by ")
            .Append("10 %, and every search for the edge's events begins there.\n")
            .Append("- A p % level of vds is on + p (bus_voltage − on); of a current, p of i_on or i_off. A crossing ")
            .Append("counts when the signal goes on by max(3 σ, 1 % of the step), and lies on the line between the ")
            .Append("two samples that straddle the level (IEEE 181). A level within that of its 0 % state: \"level within ")
            .Append("the noise\".\n")
            .Append("- Integrals are trapezoidal, with the part-samples at both ends.\n")
            .Append("- irr is the diode's current, positive in reverse; iL is constant until vds_low falls through ")
            .Append("50 %, and the line of i_on after.\n");
        foreach (QuantityOwner owner in Enum.GetValues<QuantityOwner>())
        {
            text.Append("\n## Of the ").Append(owner.ToString().ToLowerInvariant()).Append('\n');
            foreach (Quantity quantity in All)
            {
                if (quantity.Owner == owner)
                {
                    Describe(text, quantity);
                }
            }
        }

        return text.ToString();
    }

    private static void Describe(StringBuilder text, Quantity quantity)
    {
        text.Append("\n### ").Append(quantity.Name).Append("\n\n").Append(quantity.Meaning).Append(" Unit: ")
            .Append(quantity.Unit).Append('.');
        if (quantity.IgbtDefault is not null)
        {
            text.Append(" Default for an IGBT: `").Append(quantity.IgbtDefault).Append("`.");
        }

        text.Append("\n\n| definition | rule | channels |\n|---|---|---|\n");
        foreach (QuantityDefinition definition in quantity.Definitions)
        {
            text.Append("| `").Append(definition.Id).Append('`');
            if (definition.HasRoutes)
            {
                text.Append(", `").Append(definition.Id).Append(DefinitionId.LoadLineRoute).Append('`');
            }

            text.Append(" | ").Append(definition.Rule).Append(" | ")
                .AppendJoin(' ', definition.Channels.Select(Traces.ChannelNames.Name)).Append(" |\n");
        }
    }
}
