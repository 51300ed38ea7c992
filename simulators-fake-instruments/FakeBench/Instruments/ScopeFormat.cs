using System.Buffers.Binary;
using System.Globalization;
using FakeBench.Scpi;

namespace FakeBench.Instruments;

/// <summary>How the scope says a record: type and order of the bytes, and the preamble that scales the codes.</summary>
/// <remarks>Source: SCPI-1999 volume 2, 9 (FORMat): NORMal sends the high byte first and stands after reset.</remarks>
public sealed class ScopeFormat
{
    private bool _ascii = true;
    private int _length = 16;
    private bool _swapped;

    // An 8-bit integer holds the high bits of a 12-bit code.
    private int Dropped(int bits) => !_ascii && _length == 8 && bits > 8 ? bits - 8 : 0;

    /// <summary>Goes back to the settings after power-on.</summary>
    public void Reset() => (_ascii, _length, _swapped) = (true, 16, false);

    /// <summary>Adds the FORMat commands.</summary>
    public void AddTo(CommandTree commands)
    {
        ArgumentNullException.ThrowIfNull(commands);
        commands.Add("FORMat[:DATA]", 1, 2, (call, _) => Set(call));
        commands.Ask("FORMat[:DATA]?", _ => _ascii
            ? "ASC,0"
            : string.Create(CultureInfo.InvariantCulture, $"INT,{_length}"));
        commands.Set("FORMat:BORDer", call => _swapped = call.Choice(0, "NORMal", "SWAPped") == "SWAPped");
        commands.Ask("FORMat:BORDer?", _ => _swapped ? "SWAP" : "NORM");
    }

    /// <summary>The preamble of an input.</summary>
    /// <param name="record">The record.</param>
    /// <param name="input">The input, from 1.</param>
    /// <param name="bits">Bits of the converter.</param>
    /// <param name="count">Acquisitions so far.</param>
    /// <param name="scale">What is said of the volts a step, over what they are, 1.</param>
    /// <returns>Points, xincrement, xorigin, xreference, yincrement, yorigin, yreference, lowest code, highest code,
    /// acquisition count.</returns>
    public string Preamble(ScopeRecord record, int input, int bits, long count, double scale)
    {
        ArgumentNullException.ThrowIfNull(record);
        AcquisitionSettings settings = record.Settings;
        InputSettings set = settings.Inputs[input - 1];
        int kept = bits - Dropped(bits);
        string[] fields =
        [
            Numbers.Nr1(record.Points(input)),
            Numbers.Nr3(settings.Interval),
            Numbers.Nr3(-settings.Pretrigger),
            "0",
            Numbers.Nr3(scale * set.Span / (1 << kept)),
            Numbers.Nr3(set.Offset),
            "0",
            Numbers.Nr1(-(1 << (kept - 1))),
            Numbers.Nr1((1 << (kept - 1)) - 1),
            Numbers.Nr1(count),
        ];
        return string.Join(',', fields);
    }

    /// <summary>Says the codes of an input.</summary>
    public void Data(short[] codes, int bits, Reply reply)
    {
        ArgumentNullException.ThrowIfNull(codes);
        ArgumentNullException.ThrowIfNull(reply);
        if (_ascii)
        {
            reply.Say(string.Join(',', codes.Select(code => Numbers.Nr1(code))));
            return;
        }

        int drop = Dropped(bits);
        byte[] bytes = new byte[codes.Length * (_length / 8)];
        for (int i = 0; i < codes.Length; i++)
        {
            if (_length == 8)
            {
                bytes[i] = (byte)(sbyte)(codes[i] >> drop);
            }
            else if (_swapped)
            {
                BinaryPrimitives.WriteInt16LittleEndian(bytes.AsSpan(2 * i), codes[i]);
            }
            else
            {
                BinaryPrimitives.WriteInt16BigEndian(bytes.AsSpan(2 * i), codes[i]);
            }
        }

        reply.SayBlock(bytes);
    }

    private void Set(Call call)
    {
        bool ascii = call.Choice(0, "ASCii", "INTeger") == "ASCii";
        int length = _length;
        if (!ascii && call.Data.Count == 2)
        {
            double asked = call.Data[1].Number("");
            length = asked is 8 or 16 ? (int)asked : throw new ScpiException(-224, call.Data[1].Text);
        }

        (_ascii, _length) = (ascii, length);
    }
}
