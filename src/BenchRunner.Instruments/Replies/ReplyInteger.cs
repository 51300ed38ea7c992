using System.Globalization;

namespace BenchRunner.Instruments.Replies;

/// <summary>Whole numbers: NR1 and the hexadecimal, octal and binary forms (IEEE 488.2, 8.7.2, 8.7.5 to
/// 8.7.7).</summary>
public static class ReplyInteger
{
    // Above 2^53 a double no longer holds every whole number, so one sent with an exponent may not be what was meant.
    private const double Exact = 9_007_199_254_740_992;

    /// <summary>Reads one whole number.</summary>
    /// <param name="reply">One element of a reply, white space round it allowed.</param>
    /// <exception cref="ReplyException">Empty, no number, a fraction, more than one, or beyond 64 bits with
    /// sign.</exception>
    /// <remarks>A whole value sent as NR2 or NR3 is taken, since exact.</remarks>
    public static long Parse(ReadOnlySpan<byte> reply)
    {
        var value = ReplyText.Value(reply);
        if (value[0] == '#')
        {
            return Based(value);
        }

        if (!ReplyNumber.IsNumeric(value))
        {
            throw ReplyText.Refusal(value, ReplyFault.NotANumber);
        }

        if (value.IndexOfAny((byte)'.', (byte)'E', (byte)'e') < 0)
        {
            return long.TryParse(value, NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture, out var whole)
                ? whole
                : throw new ReplyException(ReplyFault.OutOfRange, value);
        }

        var number = ReplyNumber.Parse(value);
        return Math.Floor(number) != number ? throw new ReplyException(ReplyFault.NotAnInteger, value)
            : Math.Abs(number) > Exact ? throw new ReplyException(ReplyFault.OutOfRange, value)
            : (long)number;
    }

    private static long Based(ReadOnlySpan<byte> value)
    {
        var bits = value.Length < 3 ? 0 : (value[1] | 0x20) switch { 'h' => 4, 'q' => 3, 'b' => 1, _ => 0 };
        if (bits == 0)
        {
            throw new ReplyException(ReplyFault.NotANumber, value);
        }

        long number = 0;
        foreach (var c in value[2..])
        {
            var digit = char.IsAsciiHexDigit((char)c) ? Convert.ToInt32(((char)c).ToString(), 16) : int.MaxValue;
            if (digit >= 1 << bits)
            {
                throw ReplyText.Refusal(value, ReplyFault.NotANumber);
            }

            if (number > long.MaxValue >> bits)
            {
                throw new ReplyException(ReplyFault.OutOfRange, value);
            }

            number = (number << bits) | (uint)digit;
        }

        return number;
    }
}
