using BenchRunner.Instruments.Replies;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Instruments.Roles;

/// <summary>What a scope says of the codes of one channel: t = XOrigin + (i − XReference) · XIncrement,
/// v = (code − YReference) · YIncrement + YOrigin.</summary>
internal sealed record ScopePreamble(
    long Points,
    double XIncrement,
    double XOrigin,
    double XReference,
    double YIncrement,
    double YOrigin,
    double YReference,
    short LowRail,
    short HighRail,
    long Count)
{
    private const int Fields = 10;

    /// <summary>Span from rail to rail, V or A.</summary>
    public double Span => (HighRail - LowRail) * YIncrement;

    public static ScopePreamble Parse(ReadOnlySpan<byte> reply)
    {
        var fields = ReplyList.Numbers(reply, Fields);
        foreach (var field in fields)
        {
            if (!double.IsFinite(field))
            {
                throw new ReplyException(ReplyFault.NotANumber, reply);
            }
        }

        return new ScopePreamble(
            Whole(fields[0], long.MaxValue, reply), fields[1], fields[2], fields[3], fields[4], fields[5], fields[6],
            (short)Whole(fields[7], short.MaxValue, reply), (short)Whole(fields[8], short.MaxValue, reply),
            Whole(fields[9], long.MaxValue, reply));
    }

    public RawTrace Trace(Channel channel, short[] codes) => new(
        channel, codes, XOrigin - (XReference * XIncrement), XIncrement, YIncrement, YOrigin, YReference, LowRail,
        HighRail);

    /// <summary>Why the codes are not of this acquisition or not of the scale that was asked for; null where they
    /// are.</summary>
    public string? Doubt(ScopeSettings settings, ScopeChannelSettings channel, long count)
    {
        const double Tolerance = ScopeSetup.Tolerance;
        var interval = settings.Interval.Value;
        if (Count != count)
        {
            return FormattableString.Invariant($"of acquisition {Count}, not {count}");
        }

        if (Points != settings.Points)
        {
            return FormattableString.Invariant($"{Points} samples where {settings.Points} are due");
        }

        if (!(Math.Abs(XIncrement - interval) <= interval * Tolerance))
        {
            return FormattableString.Invariant($"sample interval {XIncrement} s where {interval} s was set");
        }

        return Math.Abs(Span - channel.Span) <= channel.Span * Tolerance
            ? null
            : FormattableString.Invariant($"range {Span} where {channel.Span} was set");
    }

    private static long Whole(double field, long most, ReadOnlySpan<byte> reply) =>
        Math.Floor(field) == field && Math.Abs(field) <= most
            ? (long)field
            : throw new ReplyException(ReplyFault.NotAnInteger, reply);
}
