using BenchRunner.Evidence.Codecs;
using CsCheck;

namespace BenchRunner.Evidence.Tests.Codecs;

public sealed class TraceCodecTests
{
    private static readonly Gen<short[]> Anything = Gen.OneOf(
        Gen.Short.Array[0, 3000],
        Gen.Short[-3, 3].Array[0, 3000],
        Gen.Select(Gen.Short, Gen.Int[0, 3000], (code, count) => Enumerable.Repeat(code, count).ToArray()),
        Gen.Int[1, 2000].Select(count =>
            Enumerable.Range(0, count).Select(i => i % 2 == 0 ? short.MinValue : short.MaxValue).ToArray()),
        Gen.Select(Gen.Short, Gen.Short, Gen.Int[0, 2000], (from, step, count) =>
            Enumerable.Range(0, count).Select(i => unchecked((short)(from + (i * step)))).ToArray()));

    [Fact]
    public void Every_sequence_of_codes_comes_back_bit_for_bit() => Anything.Sample(codes =>
    {
        (int codec, byte[] bytes) = TraceCodec.Encode(codes);
        Assert.Equal(codes, TraceCodec.Decode(codec, bytes, codes.Length));
        Assert.Equal(codes, TraceCodec.Decode(TraceCodec.Plain, TraceCodec.Bytes(codes), codes.Length));
    });

    [Fact]
    public void Nothing_grows() => Anything.Sample(codes => TraceCodec.Encode(codes).Bytes.Length <= 2 * codes.Length);

    [Fact]
    public void Plain_codes_are_little_endian() =>
        Assert.Equal([0x02, 0x01, 0xff, 0xff], TraceCodec.Bytes([0x0102, -1]));

    [Fact]
    public void A_switching_trace_takes_less_than_half()
    {
        short[] codes = Samples.Trace(Signals.Traces.Channel.VdsLow, 7, 20_000).Codes;
        Assert.InRange(TraceCodec.Encode(codes).Bytes.Length, 1, codes.Length);
    }

    [Fact]
    public void Damaged_bytes_give_codes_or_a_clear_refusal() =>
        Gen.Select(Gen.Byte.Array[0, 400], Gen.Int[0, 300], Gen.Int[-1, 3]).Sample((bytes, samples, codec) =>
        {
            try
            {
                Assert.Equal(samples, TraceCodec.Decode(codec, bytes, samples).Length);
            }
            catch (EvidenceException)
            {
                // The one way of saying so.
            }
        });
}
