using System.Buffers;

namespace BenchRunner.Signals.Traces;

/// <summary>Arrays for the samples of one analysis, rented and given back together.</summary>
/// <remarks>A record of a million samples a channel needs some 40 MB for a moment: fetched anew from the system each
/// time, that would cost more than the analysis.</remarks>
internal sealed class SampleBuffers : IDisposable
{
    private readonly List<double[]> _rented = [];

    /// <summary>An array of at least so many elements, of any content.</summary>
    public double[] Rent(int count)
    {
        double[] rented = ArrayPool<double>.Shared.Rent(count);
        _rented.Add(rented);
        return rented;
    }

    /// <summary>Gives all arrays back; nobody may use them after.</summary>
    public void Dispose()
    {
        _rented.ForEach(rented => ArrayPool<double>.Shared.Return(rented));
        _rented.Clear();
    }
}
