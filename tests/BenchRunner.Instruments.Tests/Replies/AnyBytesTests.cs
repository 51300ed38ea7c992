using BenchRunner.Instruments.Replies;
using CsCheck;

namespace BenchRunner.Instruments.Tests.Replies;

public class AnyBytesTests
{
    private const string Telling = "0123456789+-.eE,;#\"' \r\nNAIF";

    public static TheoryData<string> Readings => [.. All.Keys];

    private static readonly Dictionary<string, Func<byte[], object>> All = new()
    {
        ["number"] = b => ReplyNumber.Parse(b),
        ["integer"] = b => ReplyInteger.Parse(b),
        ["word"] = b => ReplyWord.Parse(b),
        ["boolean"] = b => ReplyWord.ParseBoolean(b),
        ["string"] = b => ReplyString.Parse(b),
        ["numbers"] = b => ReplyList.Numbers(b),
        ["units"] = b => ReplyList.Units(b),
        ["elements"] = b => ReplyList.Elements(b),
        ["identity"] = b => ReplyIdentity.Parse(b),
        ["error"] = b => ErrorEntry.Parse(b),
        ["line"] = b => ReplyLine.TryRead(b, true, out _, out _),
        ["codes"] = b => ReplyArray.Codes(b, ByteOrder.Normal),
        ["indefinite"] = b => IndefiniteBlock.Read(b).ToArray(),
    };

    [Theory]
    [MemberData(nameof(Readings))]
    public void Any_bytes_give_a_value_or_a_named_fault_and_nothing_else(string reading)
    {
        // Half of the bytes are such as numbers, lists, strings and blocks are made of, so that the readings get far.
        var bytes = Gen.OneOf(Gen.Byte, Gen.Int[0, Telling.Length - 1].Select(i => (byte)Telling[i])).Array[0, 24];
        bytes.Sample(b =>
        {
            try
            {
                All[reading](b);
            }
            catch (ReplyException e)
            {
                Assert.DoesNotContain(e.Message, char.IsControl);
            }
        });
    }
}
