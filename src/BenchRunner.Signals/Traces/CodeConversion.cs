using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace BenchRunner.Signals.Traces;

/// <summary>From ADC codes to values: code · gain + offset.</summary>
internal static class CodeConversion
{
    /// <summary>Converts codes.</summary>
    /// <param name="codes">The codes.</param>
    /// <param name="gain">Volts or amperes a code.</param>
    /// <param name="offset">Value of code 0, V or A.</param>
    /// <param name="values">Receives the values, V or A; as many.</param>
    /// <remarks>One multiplication and one addition a sample, each rounded, whatever the width of a step: the same bits
    /// on every machine.</remarks>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static void ToValues(ReadOnlySpan<short> codes, double gain, double offset, Span<double> values)
    {
        values = values[..codes.Length];
        ref short source = ref MemoryMarshal.GetReference(codes);
        ref double target = ref MemoryMarshal.GetReference(values);
        Vector256<double> gains = Vector256.Create(gain);
        Vector256<double> offsets = Vector256.Create(offset);
        int i = 0;
        for (; i <= codes.Length - Vector128<short>.Count; i += Vector128<short>.Count)
        {
            (Vector128<int> low, Vector128<int> high) = Vector128.Widen(Vector128.LoadUnsafe(ref source, (nuint)i));
            Scale(low).StoreUnsafe(ref target, (nuint)i);
            Scale(high).StoreUnsafe(ref target, (nuint)(i + 4));
        }

        for (; i < codes.Length; i++)
        {
            values[i] = (codes[i] * gain) + offset;
        }

        Vector256<double> Scale(Vector128<int> four)
        {
            (Vector128<long> a, Vector128<long> b) = Vector128.Widen(four);
            return (Vector256.ConvertToDouble(Vector256.Create(a, b)) * gains) + offsets;
        }
    }
}
