using FakeBench.Physics;

namespace FakeBench.Instruments;

/// <summary>Finds the trigger in a train and cuts the record out of it.</summary>
public static class Trigger
{
    /// <summary>Time of the first crossing of a level, s after the driver's first edge; null: none.</summary>
    public static double? Find(TrainTrajectory train, Signal signal, double level, bool rising)
    {
        ArgumentNullException.ThrowIfNull(train);
        double[] values = train[signal];
        for (int i = 1; i < values.Length; i++)
        {
            (double before, double after) = (values[i - 1], values[i]);
            bool crosses = rising ? before < level && after >= level : before > level && after <= level;
            if (crosses)
            {
                return train.Start + ((i - 1 + ((level - before) / (after - before))) * train.Interval);
            }
        }

        return null;
    }

    /// <summary>The samples of a record that starts at a time, or just before it.</summary>
    /// <param name="train">The train; longer than the record.</param>
    /// <param name="start">Time of the record's first sample, s after the driver's first edge.</param>
    /// <param name="points">Its samples.</param>
    /// <returns>The samples, and how much later than its grid the record starts, s; null where the train does not
    /// cover it.</returns>
    public static (TrainTrajectory Part, double Remainder)? Cut(TrainTrajectory train, double start, int points)
    {
        ArgumentNullException.ThrowIfNull(train);
        double exact = (start - train.Start) / train.Interval;
        double first = Math.Floor(exact);
        if (first < 0 || first + points > train.Points)
        {
            return null;
        }

        int from = (int)first;
        double[][] rows = [.. train.Signals.Select(row => row[from..(from + points)])];
        var part = train with { Start = train.Start + (from * train.Interval), Signals = rows };
        return (part, (exact - first) * train.Interval);
    }
}
