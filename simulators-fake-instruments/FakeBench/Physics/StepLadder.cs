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
    private static readonly double[] Quarters = [1, 1.189207115002721, 1.4142135623730951, 1.681792830507429];
    private static readonly double[] Rungs = Build();

    /// <summary>Rounds a step down to a rung; the lowest rung for anything below it.</summary>
    public static double RoundDown(double step)
    {
        if (!(step > Smallest)) return Smallest;
        // The octave by the exponent; a rung's last digits may put the step just below its first one.
        int rung = Math.Min(Math.ILogB(step / Smallest), Octaves - 1) * Quarters.Length;
        while (rung > 0 && Rungs[rung] > step) rung--;
        while (rung + 1 < Rungs.Length && Rungs[rung + 1] <= step) rung++;
        return Rungs[rung];
    }

    private static double[] Build()
    {
        var rungs = new double[Octaves * Quarters.Length];
        double octave = Smallest;
        for (int i = 0; i < rungs.Length; i++)
        {
            rungs[i] = octave * Quarters[i % Quarters.Length];
            if (i % Quarters.Length == Quarters.Length - 1) octave *= 2;
        }

        return rungs;
    }
}
