namespace FakeBench.Physics;

/// <summary>The step sizes a solver may take: four an octave.</summary>
/// <remarks>
/// A step control that follows its error estimate exactly turns one unit in the last place of a parameter into another
/// sequence of steps and so into another result, at the level of the tolerance. Rounded down to a ladder, the sequence
/// almost never changes, and another platform's exponential hardly matters.
/// </remarks>
public static class StepLadder
{
    /// <summary>The smallest step, s.</summary>
    public const double Smallest = 1e-15;

    private const int Octaves = 64;
    private static readonly double[] Rungs = Build();

    /// <summary>Rounds a step down to a rung; the lowest rung for anything below it.</summary>
    public static double RoundDown(double step)
    {
        int low = 0;
        int high = Rungs.Length;
        while (high - low > 1)
        {
            int middle = (low + high) / 2;
            if (Rungs[middle] <= step) low = middle;
            else high = middle;
        }

        return Rungs[low];
    }

    private static double[] Build()
    {
        double[] quarters = [1, 1.189207115002721, 1.4142135623730951, 1.681792830507429];
        var rungs = new double[Octaves * quarters.Length];
        double octave = Smallest;
        for (int i = 0; i < rungs.Length; i++)
        {
            rungs[i] = octave * quarters[i % quarters.Length];
            if (i % quarters.Length == quarters.Length - 1) octave *= 2;
        }

        return rungs;
    }
}
