using System.Globalization;

namespace FakeBench.Faults;

/// <summary>When a fault begins.</summary>
/// <param name="Kind">What is counted.</param>
/// <param name="Value">Its value: number of the train or block, V, or s.</param>
public sealed record Moment(MomentKind Kind, double Value)
{
    /// <summary>From the start.</summary>
    public static Moment Start { get; } = new(MomentKind.Start, 0);

    /// <summary>Reads <c>fire:N</c>, <c>volts:V</c>, <c>seconds:S</c> or <c>block:N</c>.</summary>
    /// <returns>The moment; null where the text is none.</returns>
    public static Moment? Parse(string text)
    {
        ArgumentNullException.ThrowIfNull(text);
        string[] parts = text.Split(':');
        if (parts.Length != 2
            || !double.TryParse(
                parts[1], NumberStyles.AllowDecimalPoint, CultureInfo.InvariantCulture, out double value))
        {
            return null;
        }

        MomentKind? kind = parts[0] switch
        {
            "fire" => MomentKind.Fire,
            "volts" => MomentKind.Volts,
            "seconds" => MomentKind.Seconds,
            "block" => MomentKind.Block,
            _ => null,
        };
        bool counts = kind is MomentKind.Fire or MomentKind.Block;
        bool isWrong = kind is null || (counts && (value < 1 || value != Math.Floor(value)));
        return isWrong ? null : new Moment(kind!.Value, value);
    }

    /// <inheritdoc/>
    public override string ToString() => Kind == MomentKind.Start
        ? "start"
        : string.Create(CultureInfo.InvariantCulture, $"{Kind.ToString().ToLowerInvariant()}:{Value}");
}
