using System.Buffers.Binary;
using System.Net.Sockets;

namespace FakeBench.Hosting.Hislip;

/// <summary>One HiSLIP message: header of 16 bytes, big-endian, and payload (IVI-6.1, 2.3).</summary>
/// <param name="Kind">Its kind.</param>
/// <param name="Control">Control code.</param>
/// <param name="Parameter">Message parameter.</param>
/// <param name="Payload">Payload.</param>
public readonly record struct Frame(byte Kind, byte Control, uint Parameter, byte[] Payload)
{
    /// <summary>Bytes of the header.</summary>
    public const int Head = 16;

    /// <summary>The longest payload taken from a client, bytes.</summary>
    public const ulong LongestPayload = 64UL << 20;

    /// <summary>Reads the header of a message.</summary>
    /// <param name="head">16 bytes.</param>
    /// <param name="length">Bytes of payload that follow.</param>
    /// <returns>The message, its payload still empty.</returns>
    /// <exception cref="TroubleException">No header, or of a payload too long.</exception>
    public static Frame Open(ReadOnlySpan<byte> head, out int length)
    {
        if (head[0] != 'H' || head[1] != 'S')
        {
            throw TroubleException.BadHeader();
        }

        ulong announced = BinaryPrimitives.ReadUInt64BigEndian(head[8..Head]);
        length = announced <= LongestPayload ? (int)announced : throw TroubleException.TooLarge();
        return new Frame(head[2], head[3], BinaryPrimitives.ReadUInt32BigEndian(head[4..8]), []);
    }

    /// <summary>Reads one message.</summary>
    /// <returns>It; null: the stream ended, between two messages or inside one.</returns>
    /// <exception cref="TroubleException">No message, or one too long.</exception>
    public static async Task<Frame?> Receive(Socket socket, CancellationToken stop)
    {
        byte[] head = new byte[Head];
        if (!await Fill(socket, head, stop))
        {
            return null;
        }

        Frame frame = Open(head, out int length);
        byte[] payload = new byte[length];
        return await Fill(socket, payload, stop) ? frame with { Payload = payload } : null;
    }

    /// <summary>The message as bytes.</summary>
    public byte[] ToBytes()
    {
        byte[] bytes = new byte[Head + Payload.Length];
        bytes[0] = (byte)'H';
        bytes[1] = (byte)'S';
        bytes[2] = Kind;
        bytes[3] = Control;
        BinaryPrimitives.WriteUInt32BigEndian(bytes.AsSpan(4), Parameter);
        BinaryPrimitives.WriteUInt64BigEndian(bytes.AsSpan(8), (ulong)Payload.Length);
        Payload.CopyTo(bytes, Head);
        return bytes;
    }

    private static async Task<bool> Fill(Socket socket, byte[] buffer, CancellationToken stop)
    {
        for (int filled = 0; filled < buffer.Length;)
        {
            int count = await socket.ReceiveAsync(buffer.AsMemory(filled), stop);
            if (count == 0)
            {
                return false;
            }

            filled += count;
        }

        return true;
    }
}
