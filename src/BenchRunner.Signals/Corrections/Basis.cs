using System.Runtime.CompilerServices;

namespace BenchRunner.Signals.Corrections;

/// <summary>The four cubic B-splines on uniform knots that are not zero at a place, with two derivatives, by knot
/// interval.</summary>
[InlineArray(12)]
internal struct Basis
{
    private double _first;

    /// <summary>Spline j (0 to 3) differentiated some times.</summary>
    public double this[int derivative, int j]
    {
        get => this[(4 * derivative) + j];
        private set => this[(4 * derivative) + j] = value;
    }

    /// <summary>The splines at a place; places outside are moved to the end.</summary>
    /// <param name="place">In knot intervals from the first.</param>
    /// <param name="size">How many splines there are: knot intervals + 3.</param>
    /// <returns>The first of the four, and the four.</returns>
    public static (int First, Basis Splines) At(double place, int size)
    {
        place = Math.Clamp(place, 0, size - 3);
        int at = Math.Min((int)place, size - 4);
        double p = place - at, q = 1 - p;
        Basis b = default;
        b[0, 0] = q * q * q / 6;
        b[0, 1] = ((3 * p * p * p) - (6 * p * p) + 4) / 6;
        b[0, 2] = ((3 * q * q * q) - (6 * q * q) + 4) / 6;
        b[0, 3] = p * p * p / 6;
        b[1, 0] = -q * q / 2;
        b[1, 1] = ((3 * p * p) - (4 * p)) / 2;
        b[1, 2] = -((3 * q * q) - (4 * q)) / 2;
        b[1, 3] = p * p / 2;
        b[2, 0] = q;
        b[2, 1] = (3 * p) - 2;
        b[2, 2] = (3 * q) - 2;
        b[2, 3] = p;
        return (at, b);
    }
}
