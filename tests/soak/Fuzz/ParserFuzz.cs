using BenchRunner.Instruments.Replies;

namespace BenchRunner.Soak.Fuzz;

/// <summary>Messages through every pure parser in turn.</summary>
internal static class ParserFuzz
{
    private static readonly (string Name, Reading Read)[] _readings =
    [
        ("number", b => ReplyNumber.Parse(b)),
        ("integer", b => ReplyInteger.Parse(b)),
        ("word", b => ReplyWord.Parse(b)),
        ("boolean", b => ReplyWord.ParseBoolean(b)),
        ("string", b => ReplyString.Parse(b)),
        ("numbers", b => ReplyList.Numbers(b)),
        ("units", b => ReplyList.Units(b)),
        ("elements", b => ReplyList.Elements(b)),
        ("identity", b => ReplyIdentity.Parse(b)),
        ("error", b => ErrorEntry.Parse(b).ToString()),
        ("line", b => ReplyLine.TryRead(b, false, out _, out _)),
        ("quoted line", b => ReplyLine.TryRead(b, true, out _, out _)),
        ("line with CR", b => ReplyLine.TryRead(b, false, out _, out _, (byte)'\r')),
        ("codes", b => ReplyArray.Codes(b, ByteOrder.Normal)),
        ("block head", b => BlockHeader.TryRead(b, BlockHeader.Limit, out _)),
        ("indefinite block", b => _ = IndefiniteBlock.Read(b).Length),
        ("blocks", Blocks),
    ];

    private static readonly BlockForm[] _forms =
    [
        BlockForm.Standard, new(BlockEnd.CarriageReturn, ""), new(BlockEnd.Nothing, ""), new(BlockEnd.NewLine, "#9 "),
    ];

    private delegate void Reading(ReadOnlySpan<byte> reply);

    /// <summary>Most memory that reading one message may allocate, bytes, the exception with its trace counted: 16 KiB
    /// and 64 bytes for each byte of it.</summary>
    public static long Bound(int length) => (16 * 1024) + (64L * length);

    /// <summary>Runs them.</summary>
    public static void Run(ulong seed, int count, List<string> failures)
    {
        var messages = new Messages(seed);
        Span<byte> buffer = stackalloc byte[Messages.Longest];
        foreach ((string _, Reading read) in _readings)
        {
            // What a first call allocates for the program itself is no message's.
            Try(read, "1"u8);
            Try(read, "\0"u8);
        }

        for (long number = 0; number < count && failures.Count < FuzzRun.MostFailures; number++)
        {
            ReadOnlySpan<byte> message = buffer[..messages.Make(number, buffer)];
            (string name, Reading read) = _readings[number % _readings.Length];
            long before = GC.GetAllocatedBytesForCurrentThread();
            string? failed = Try(read, message);
            long allocated = GC.GetAllocatedBytesForCurrentThread() - before;
            failed ??= allocated > Bound(message.Length) ? $"allocated {allocated} bytes" : null;
            if (failed is not null)
            {
                failures.Add(FormattableString.Invariant(
                    $"seed {seed}, parser message {number} as {name}, {Messages.Shown(message)}: {failed}"));
            }
        }
    }

    private static string? Try(Reading read, ReadOnlySpan<byte> message)
    {
        try
        {
            read(message);
            return null;
        }
        catch (ReplyException)
        {
            return null;
        }
        catch (Exception e)
        {
            return e.ToString();
        }
    }

    /// <summary>The reader of blocks, given the message in pieces.</summary>
    private static void Blocks(ReadOnlySpan<byte> message)
    {
        using var reader = new BlockReader();
        reader.Begin(64, form: _forms[message.Length % _forms.Length]);
        int piece = 1 + (message.Length % 7);
        while (!message.IsEmpty && !reader.IsWhole)
        {
            int count = Math.Min(Math.Min(piece, message.Length), reader.Space.Length);
            message[..count].CopyTo(reader.Space.Span);
            message = message[count..];
            reader.Advance(count);
        }
    }
}
