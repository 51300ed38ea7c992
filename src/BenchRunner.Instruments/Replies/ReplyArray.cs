using System.Buffers.Binary;
using System.Runtime.InteropServices;

namespace BenchRunner.Instruments.Replies;

/// <summary>The elements of a block.</summary>
public static class ReplyArray
{
    /// <summary>Reads codes of 16 bits with sign.</summary>
    /// <param name="block">The block's bytes.</param>
    /// <param name="order">Which byte comes first.</param>
    /// <exception cref="ReplyException">An odd number of bytes.</exception>
    public static short[] Codes(ReadOnlySpan<byte> block, ByteOrder order)
    {
        Whole(block, sizeof(short));
        var codes = MemoryMarshal.Cast<byte, short>(block).ToArray();
        if (order == ByteOrder.Normal == BitConverter.IsLittleEndian)
        {
            BinaryPrimitives.ReverseEndianness(codes, codes);
        }

        return codes;
    }

    /// <summary>Reads numbers of any format.</summary>
    /// <param name="block">The block's bytes.</param>
    /// <param name="format">What one element is.</param>
    /// <param name="order">Which byte comes first.</param>
    /// <returns>The numbers; NaN and ±∞ as <see cref="ReplyNumber.Parse"/> gives them.</returns>
    /// <exception cref="ReplyException">No whole number of elements.</exception>
    public static double[] Numbers(ReadOnlySpan<byte> block, ElementFormat format, ByteOrder order)
    {
        var size = Size(format);
        Whole(block, size);
        var numbers = new double[block.Length / size];
        Span<byte> element = stackalloc byte[size];
        for (var i = 0; i < numbers.Length; i++)
        {
            block.Slice(i * size, size).CopyTo(element);
            if (order == ByteOrder.Swapped)
            {
                element.Reverse();
            }

            numbers[i] = Element(element, format);
        }

        return numbers;
    }

    private static double Element(ReadOnlySpan<byte> bytes, ElementFormat format) => format switch
    {
        ElementFormat.Integer8 => (sbyte)bytes[0],
        ElementFormat.Unsigned8 => bytes[0],
        ElementFormat.Integer16 => BinaryPrimitives.ReadInt16BigEndian(bytes),
        ElementFormat.Unsigned16 => BinaryPrimitives.ReadUInt16BigEndian(bytes),
        ElementFormat.Real32 => ReplyNumber.Special(BinaryPrimitives.ReadSingleBigEndian(bytes)),
        ElementFormat.Real64 => ReplyNumber.Special(BinaryPrimitives.ReadDoubleBigEndian(bytes)),
        _ => throw new ArgumentOutOfRangeException(nameof(format)),
    };

    private static int Size(ElementFormat format) => format switch
    {
        ElementFormat.Integer8 or ElementFormat.Unsigned8 => 1,
        ElementFormat.Integer16 or ElementFormat.Unsigned16 => 2,
        ElementFormat.Real32 => 4,
        ElementFormat.Real64 => 8,
        _ => throw new ArgumentOutOfRangeException(nameof(format)),
    };

    private static void Whole(ReadOnlySpan<byte> block, int size)
    {
        if (block.Length % size != 0)
        {
            throw new ReplyException(ReplyFault.BadLength, $"{block.Length} bytes, {size} an element");
        }
    }
}
