using System.Buffers;
using System.Globalization;
using System.Text;

namespace FakeBench.Scpi;

/// <summary>The response message that one program message builds up: units joined by semicolons.</summary>
public sealed class Reply
{
    private readonly ArrayBufferWriter<byte> _bytes = new();

    /// <summary>Whether anything has been said.</summary>
    public bool HasContent => _bytes.WrittenCount > 0;

    /// <summary>Definite-length blocks in it.</summary>
    public int Blocks { get; private set; }

    /// <summary>Says a text.</summary>
    public void Say(string text)
    {
        Separate();
        _bytes.Write(Encoding.Latin1.GetBytes(text));
    }

    /// <summary>Says a definite-length block (IEEE 488.2, 8.7.9).</summary>
    public void SayBlock(ReadOnlySpan<byte> data)
    {
        Separate();
        string count = data.Length.ToString(CultureInfo.InvariantCulture);
        _bytes.Write(Encoding.ASCII.GetBytes($"#{count.Length}{count}"));
        _bytes.Write(data);
        Blocks++;
    }

    /// <summary>The whole message with its terminator; empty where nothing was asked.</summary>
    public byte[] Finish()
    {
        if (HasContent)
        {
            _bytes.Write("\n"u8);
        }

        return _bytes.WrittenSpan.ToArray();
    }

    private void Separate()
    {
        if (HasContent)
        {
            _bytes.Write(";"u8);
        }
    }
}
