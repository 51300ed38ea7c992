using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Plans;

/// <summary>
/// Which place of the half bridge fires and which one freewheels, and what follows for channels and limits.
/// </summary>
public static class HalfBridge
{
    /// <summary>
    /// Whether the high switch fires: a switch under test in the high place, or a diode under test in the low one.
    /// </summary>
    /// <param name="sequence">The sequence.</param>
    public static bool FiresHigh(Sequence sequence)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        return sequence.Position == (sequence.Kind == DeviceKind.Diode ? DevicePosition.Low : DevicePosition.High);
    }

    /// <summary>
    /// Whether the other place holds a companion with a serial of its own; a module fills both places.
    /// </summary>
    /// <param name="sequence">The sequence.</param>
    public static bool NeedsCompanion(Sequence sequence)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        return sequence.Position != DevicePosition.Both;
    }

    /// <summary>The place of the companion, <c>low</c> or <c>high</c>; null where there is none.</summary>
    /// <param name="sequence">The sequence.</param>
    public static string? CompanionPlace(Sequence sequence)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        return sequence.Position switch
        {
            DevicePosition.Low => "high",
            DevicePosition.High => "low",
            _ => null,
        };
    }

    /// <summary>
    /// Whether a quantity says something about the device under test or the circuit, not about a companion.
    /// </summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="owner">What the quantity says something about.</param>
    public static bool IsUnderTest(Sequence sequence, QuantityOwner owner)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        QuantityOwner tested = sequence.Kind == DeviceKind.Diode ? QuantityOwner.Diode : QuantityOwner.Switch;
        return owner == QuantityOwner.Circuit || owner == tested || !NeedsCompanion(sequence);
    }

    /// <summary>
    /// The channel that plays a part: <paramref name="asIfLow"/> where low fires, its mirror image where high fires.
    /// </summary>
    /// <param name="asIfLow">The channel, named as if the low switch fired.</param>
    /// <param name="firesHigh">Whether the high switch fires.</param>
    public static Channel Playing(Channel asIfLow, bool firesHigh) => !firesHigh ? asIfLow : asIfLow switch
    {
        Channel.VgsLow => Channel.VgsHigh,
        Channel.VdsLow => Channel.VdsHigh,
        Channel.IdLow => Channel.IdHigh,
        Channel.VgsHigh => Channel.VgsLow,
        Channel.VdsHigh => Channel.VdsLow,
        Channel.IdHigh => Channel.IdLow,
        _ => asIfLow,
    };

    /// <summary>
    /// The channels that a definition needs and a bench does not record; empty where it can be formed.
    /// </summary>
    /// <param name="definition">The definition.</param>
    /// <param name="recorded">The channels recorded.</param>
    /// <param name="firesHigh">Whether the high switch fires.</param>
    /// <returns>The missing channels. The diode's current may also come from the switch's and the load's
    /// line.</returns>
    public static IReadOnlyList<Channel> Missing(
        QuantityDefinition definition, IReadOnlyCollection<Channel> recorded, bool firesHigh)
    {
        ArgumentNullException.ThrowIfNull(definition);
        ArgumentNullException.ThrowIfNull(recorded);
        bool byLoadLine = definition.HasRoutes && !recorded.Contains(Playing(Channel.IdHigh, firesHigh));
        IEnumerable<Channel> needed = byLoadLine
            ? definition.Channels.Where(channel => channel != Channel.IdHigh)
                .Concat([Channel.VgsLow, Channel.VdsLow, Channel.IdLow]).Distinct()
            : definition.Channels;
        return [.. needed.Select(channel => Playing(channel, firesHigh)).Where(channel => !recorded.Contains(channel))];
    }

    /// <summary>The channels that a bench records.</summary>
    /// <param name="bench">The bench.</param>
    public static IReadOnlyCollection<Channel> Recorded(Bench bench)
    {
        ArgumentNullException.ThrowIfNull(bench);
        return [.. bench.Channels.Select(setup => setup.Channel)];
    }
}
