namespace BenchRunner.Signals.Quantities;

/// <summary>What a kernel reads off samples: a value with the interval it rests on, or the reason why there is
/// none.</summary>
/// <param name="Value">The value, SI; meaningless where <see cref="Reason"/> is not null.</param>
/// <param name="From">Start of the interval, in (fractional) samples of the span that was read.</param>
/// <param name="To">End of the interval, in (fractional) samples.</param>
/// <param name="Reason">Why there is no value; null where there is one.</param>
/// <remarks>Not to be confused with <see cref="QuantityValue"/>, which has a name, a definition and times in
/// seconds.</remarks>
public readonly record struct Reading(double Value, double From, double To, string? Reason)
{
    /// <summary>Whether there is a value.</summary>
    public bool HasValue => Reason is null;

    /// <summary>A value over an interval; a value that is not finite becomes a reason.</summary>
    public static Reading Of(double value, double from, double to) =>
        double.IsFinite(value) && double.IsFinite(from) && double.IsFinite(to)
            ? new Reading(value, from, to, null)
            : None("the result is not a finite number");

    /// <summary>A value that was stated, not read off samples.</summary>
    public static Reading Stated(double value) => Of(value, 0, 0);

    /// <summary>No value, and why.</summary>
    public static Reading None(string reason) => new(0, 0, 0, reason);

    /// <summary>The same reading in the positions of a longer span in which this one starts at a sample.</summary>
    public Reading Shifted(double samples) => HasValue ? this with { From = From + samples, To = To + samples } : this;

    /// <summary>The reason with the name of what it kept from being formed, e.g. <c>i_on: off2 is outside the
    /// record</c>.</summary>
    internal Reading Because(string name) =>
        Reason is null || Reason.StartsWith(name, StringComparison.Ordinal) ? this : None($"{name}: {Reason}");
}
