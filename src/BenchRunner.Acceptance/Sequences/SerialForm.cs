using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Sequences;

/// <summary>What a serial must look like before a run takes it.</summary>
public static class SerialForm
{
    /// <summary>Checks a serial as typed or scanned.</summary>
    /// <param name="serial">The serial.</param>
    /// <param name="sequence">The sequence, whose form it must match.</param>
    /// <param name="source">Where it came from, e.g. <c>--device</c>.</param>
    /// <returns>What is wrong with it; null where nothing is.</returns>
    public static Problem? Check(string serial, Sequence sequence, string source)
    {
        ArgumentNullException.ThrowIfNull(serial);
        ArgumentNullException.ThrowIfNull(sequence);
        var where = new Place(source, 0, 0);
        if (!Expression.Holds(Shapes.NamePattern, serial))
        {
            return new Problem(
                where,
                $"the serial is {Shown.Quote(serial)}",
                "1 to 64 letters, digits, '.', '_' or '-'",
                "scan or type it again");
        }

        return sequence.SerialForm is not { } form || Expression.Holds(form, serial)
            ? null
            : new Problem(
                where,
                $"the serial is {Shown.Quote(serial)}",
                $"the form {form} of {sequence.Source.Path}",
                $"scan or type it again, or choose the sequence of its part ({sequence.Part} here)");
    }
}
