using System.Globalization;
using System.Text;

namespace BenchRunner.Soak.Fuzz;

/// <summary>Messages as instruments send them, then broken: bytes changed, cut out, doubled, put in. Message n of a seed
/// is always the same.</summary>
internal sealed class Messages(ulong seed)
{
    /// <summary>The longest message, bytes.</summary>
    public const int Longest = 256;

    private const string Telling = "0123456789+-.eE,;#\"' \r\nNAIFx\t";

    private static readonly byte[][] _sound =
    [
        .. new[]
        {
            "+4.00012E+02", "1", "-113,\"Undefined header;VOTL\"", "0,\"No error\"", "MAKER,MODEL,1234,1.0", "9.91E37",
            "1,0,1,0", "\"a \"\"quoted\"\" text\"", "INT,16", "#216abcdefghijklmnop", "#0abc\n", "100,1E-9,-1E-7,20,0.19,50,100",
            "1;2;3", "+9.9E+37,-9.9E37,NAN", "#HFF", "#B1010", "ON", "", "#9999999999", "5;0;400.2",
        }.Select(Encoding.ASCII.GetBytes),
    ];

    private ulong _state;

    /// <summary>Makes message n.</summary>
    /// <param name="number">Its number.</param>
    /// <param name="buffer">Takes it; at least <see cref="Longest"/> bytes.</param>
    /// <returns>Its length.</returns>
    public int Make(long number, Span<byte> buffer)
    {
        _state = seed * 0x9E3779B97F4A7C15 + (ulong)number * 0xD1B54A32D192ED03;
        byte[] sound = _sound[Below(_sound.Length)];
        sound.CopyTo(buffer);
        int length = sound.Length;
        for (int changes = Below(5); changes > 0; changes--)
        {
            length = Change(buffer, length);
        }

        return length;
    }

    /// <summary>A whole number below a bound (SplitMix64, Steele and others 2014).</summary>
    public int Below(int bound)
    {
        ulong z = _state += 0x9E3779B97F4A7C15;
        z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9;
        z = (z ^ (z >> 27)) * 0x94D049BB133111EB;
        return (int)((z ^ (z >> 31)) % (ulong)bound);
    }

    /// <summary>How a failing message is shown.</summary>
    public static string Shown(ReadOnlySpan<byte> message) => Convert.ToHexString(message).ToLower(CultureInfo.InvariantCulture);

    private int Change(Span<byte> buffer, int length)
    {
        int at = Below(length + 1);
        byte one = Below(2) == 0 ? (byte)Below(256) : (byte)Telling[Below(Telling.Length)];
        switch (Below(4))
        {
            case 0 when at < length:
                buffer[at] = one;
                return length;
            case 1 when at < length:
                buffer[(at + 1)..length].CopyTo(buffer[at..]);
                return length - 1;
            case 2 when length + length - at <= Longest:
                buffer[at..length].CopyTo(buffer[length..]);
                return length + length - at;
            case 3 when length < Longest:
                buffer[at..length].CopyTo(buffer[(at + 1)..]);
                buffer[at] = one;
                return length + 1;
            default:
                return length;
        }
    }
}
