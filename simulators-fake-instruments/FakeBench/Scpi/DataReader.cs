using System.Globalization;
using System.Text;

namespace FakeBench.Scpi;

/// <summary>Reads one element of program data.</summary>
/// <remarks>Source: IEEE 488.2, 7.7.</remarks>
internal sealed class DataReader(string message)
{
    private const int LargestExponent = 32_000;

    /// <summary>The next place that is no white space.</summary>
    public int SkipSpace(int at)
    {
        while (at < message.Length && message[at] <= ' ')
        {
            at++;
        }

        return at;
    }

    /// <summary>Reads the element at a place and moves behind it.</summary>
    public ProgramData Read(ref int at)
    {
        char first = message[at];
        return first switch
        {
            '"' or '\'' => ReadText(ref at, first),
            '#' => ReadHash(ref at),
            '(' => ReadExpression(ref at),
            '+' or '-' or '.' => ReadDecimal(ref at),
            _ when char.IsAsciiDigit(first) => ReadDecimal(ref at),
            _ when char.IsAsciiLetter(first) => ReadWord(ref at),
            ',' => throw new ScpiException(-109, "between commas"),
            _ => throw new ScpiException(-101, first.ToString()),
        };
    }

    private ProgramData ReadText(ref int at, char quote)
    {
        var text = new StringBuilder();
        for (int i = at + 1; i < message.Length; i++)
        {
            if (message[i] != quote)
            {
                text.Append(message[i]);
            }
            else if (i + 1 < message.Length && message[i + 1] == quote)
            {
                text.Append(quote);
                i++;
            }
            else
            {
                at = i + 1;
                return new ProgramData(DataKind.Text, text.ToString());
            }
        }

        throw new ScpiException(-151, "a quote is missing");
    }

    private ProgramData ReadHash(ref int at)
    {
        char form = at + 1 < message.Length ? char.ToUpperInvariant(message[at + 1]) : ' ';
        int radix = form switch { 'H' => 16, 'Q' => 8, 'B' => 2, _ => 0 };
        if (radix == 0)
        {
            return ReadBlock(ref at, form);
        }

        int start = at;
        double value = 0;
        at += 2;
        while (at < message.Length && char.IsAsciiHexDigit(message[at]))
        {
            int digit = Convert.ToInt32(message[at].ToString(), 16);
            if (digit >= radix)
            {
                throw new ScpiException(-121, message[start..(at + 1)]);
            }

            value = (value * radix) + digit;
            at++;
        }

        return at == start + 2
            ? throw new ScpiException(-120, message[start..at])
            : new ProgramData(DataKind.NonDecimal, message[start..at], value);
    }

    // An indefinite block ends with END, which a stream does not have: refused.
    private ProgramData ReadBlock(ref int at, char form)
    {
        int digits = form is >= '1' and <= '9' ? form - '0' : 0;
        int start = at + 2 + digits;
        if (digits == 0 || start > message.Length
            || !int.TryParse(
                message.AsSpan(at + 2, digits), NumberStyles.None, CultureInfo.InvariantCulture, out int count)
            || count > message.Length - start)
        {
            throw new ScpiException(-161);
        }

        at = start + count;
        return new ProgramData(DataKind.Block, message.Substring(start, count));
    }

    private ProgramData ReadExpression(ref int at)
    {
        int depth = 0;
        for (int i = at; i < message.Length; i++)
        {
            depth += message[i] switch { '(' => 1, ')' => -1, _ => 0 };
            if (depth == 0)
            {
                string text = message[at..(i + 1)];
                at = i + 1;
                return new ProgramData(DataKind.Expression, text);
            }
        }

        throw new ScpiException(-102, "a parenthesis is missing");
    }

    private ProgramData ReadWord(ref int at)
    {
        int start = at;
        while (at < message.Length && (char.IsAsciiLetterOrDigit(message[at]) || message[at] == '_'))
        {
            at++;
        }

        return at - start > 12
            ? throw new ScpiException(-141, message[start..at])
            : new ProgramData(DataKind.Word, message[start..at]);
    }

    private ProgramData ReadDecimal(ref int at)
    {
        int start = at;
        at += message[at] is '+' or '-' ? 1 : 0;
        int digits = Digits(ref at);
        if (at < message.Length && message[at] == '.')
        {
            at++;
            digits += Digits(ref at);
        }

        if (digits == 0)
        {
            throw new ScpiException(-120, message[start..at]);
        }

        if (at < message.Length && message[at] is '.' or '#' or '"')
        {
            throw new ScpiException(-121, message[start..(at + 1)]);
        }

        string mantissa = message[start..at];
        string exponent = ReadExponent(ref at);
        if (exponent.Length > 0 && (!int.TryParse(exponent, NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture,
            out int power) || Math.Abs(power) > LargestExponent))
        {
            throw new ScpiException(-123, exponent);
        }

        double value = double.Parse(
            exponent.Length > 0 ? $"{mantissa}E{exponent}" : mantissa, NumberStyles.Float,
            CultureInfo.InvariantCulture);
        return new ProgramData(DataKind.Real, message[start..at], value, ReadSuffix(ref at));
    }

    private int Digits(ref int at)
    {
        int start = at;
        while (at < message.Length && char.IsAsciiDigit(message[at]))
        {
            at++;
        }

        return at - start;
    }

    // White space before E is allowed when listening (IEEE 488.2, 7.7.2).
    private string ReadExponent(ref int at)
    {
        int e = SkipSpace(at);
        if (e >= message.Length || message[e] is not ('E' or 'e'))
        {
            return "";
        }

        int start = SkipSpace(e + 1);
        int end = start < message.Length && message[start] is '+' or '-' ? start + 1 : start;
        if (end >= message.Length || !char.IsAsciiDigit(message[end]))
        {
            return "";
        }

        Digits(ref end);
        at = end;
        return message[start..end];
    }

    private string ReadSuffix(ref int at)
    {
        int start = SkipSpace(at);
        int end = start;
        while (end < message.Length && (char.IsAsciiLetter(message[end]) || (end > start && message[end] == '/')))
        {
            end++;
        }

        at = end > start ? end : at;
        return message[start..end].ToUpperInvariant();
    }
}
