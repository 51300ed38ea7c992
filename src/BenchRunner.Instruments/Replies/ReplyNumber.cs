using System.Globalization;

namespace BenchRunner.Instruments.Replies;

/// <summary>Decimal numeric response data: NR1, NR2, NR3 (IEEE 488.2, 8.7.2 to 8.7.4) and the special values of
/// SCPI-1999.</summary>
public static class ReplyNumber
{
    // SCPI-1999 volume 1, 7.2: 9.91E37 stands for not-a-number, 9.9E37 and -9.9E37 for the infinities. Instruments that
    // keep 32-bit floats send them rounded (6e-8 relative), hence compared with a tolerance, far below their distance.
    private const double NotANumber = 9.91e37;
    private const double Infinity = 9.9e37;
    private const double Tolerance = 1e-6;

    /// <summary>Reads one number.</summary>
    /// <param name="reply">One element of a reply, white space round it allowed.</param>
    /// <returns>The number; NaN where the instrument says it has none; ±∞ for an overload. A magnitude of 9.9E37 or
    /// more is no measurement (house rule).</returns>
    /// <exception cref="ReplyException">Empty, no number, more than one, or beyond a double.</exception>
    /// <remarks>Forgiving: <c>.5</c>, <c>5.</c>, a small <c>e</c>, the words NAN, INF, NINF. A comma is never a decimal
    /// comma, whatever the culture.</remarks>
    public static double Parse(ReadOnlySpan<byte> reply)
    {
        var value = ReplyText.Value(reply);
        if (!IsNumeric(value))
        {
            return Word(value) ?? throw ReplyText.Refusal(value, ReplyFault.NotANumber);
        }

        if (!double.TryParse(value, NumberStyles.Float, CultureInfo.InvariantCulture, out var number))
        {
            throw new ReplyException(ReplyFault.NotANumber, value);
        }

        return double.IsInfinity(number) ? throw new ReplyException(ReplyFault.OutOfRange, value) : Special(number);
    }

    /// <summary>Turns the numbers that stand for something else into NaN and ±∞.</summary>
    internal static double Special(double number)
    {
        if (double.IsNaN(number) || Math.Abs(number - NotANumber) <= NotANumber * Tolerance)
        {
            return double.NaN;
        }

        return Math.Abs(number) >= Infinity * (1 - Tolerance)
            ? Math.CopySign(double.PositiveInfinity, number)
            : number;
    }

    /// <summary>Whether the text is sign, digits with a point, exponent; nothing else.</summary>
    internal static bool IsNumeric(ReadOnlySpan<byte> value)
    {
        var i = Sign(value, 0);
        var whole = Digits(value, i);
        var end = whole;
        if (end < value.Length && value[end] == '.')
        {
            end = Digits(value, end + 1);
        }

        if (end - i - (end > whole ? 1 : 0) == 0)
        {
            return false;
        }

        if (end == value.Length)
        {
            return true;
        }

        if (value[end] is not ((byte)'E' or (byte)'e'))
        {
            return false;
        }

        var exponent = Sign(value, end + 1);
        return exponent < value.Length && Digits(value, exponent) == value.Length;
    }

    private static int Sign(ReadOnlySpan<byte> value, int at) =>
        at < value.Length && value[at] is (byte)'+' or (byte)'-' ? at + 1 : at;

    private static int Digits(ReadOnlySpan<byte> value, int at)
    {
        while (at < value.Length && value[at] is >= (byte)'0' and <= (byte)'9')
        {
            at++;
        }

        return at;
    }

    private static double? Word(ReadOnlySpan<byte> value) =>
        Is(value, "NAN"u8) || Is(value, "+NAN"u8) || Is(value, "-NAN"u8) ? double.NaN
        : Is(value, "INF"u8) || Is(value, "+INF"u8) || Is(value, "INFINITY"u8) ? double.PositiveInfinity
        : Is(value, "NINF"u8) || Is(value, "-INF"u8) || Is(value, "NINFINITY"u8) ? double.NegativeInfinity
        : null;

    private static bool Is(ReadOnlySpan<byte> value, ReadOnlySpan<byte> word) =>
        System.Text.Ascii.EqualsIgnoreCase(value, word);
}
