using BenchRunner.Signals.Quantities;

namespace BenchRunner.Signals.Levels;

/// <summary>What the first pulse takes from the bus, 1: <c>bus_droop</c>, definition
/// <c>droop/first-pulse</c>.</summary>
public static class Droop
{
    /// <summary>The fall of the bus over the first pulse, as a part of what it was.</summary>
    /// <param name="before">vbus before on1, V.</param>
    /// <param name="after">vbus before off1, V.</param>
    /// <returns>(before − after) / before, over the time between the two.</returns>
    /// <example>800 V, then 790 V: 0.0125.</example>
    public static Reading Form(Reading before, Reading after) =>
        (before.Reason ?? after.Reason) is { } reason
            ? Reading.None(reason)
            : Reading.Of((before.Value - after.Value) / before.Value, before.From, after.To);
}
