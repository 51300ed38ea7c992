using BenchRunner.Acceptance.Dialects;
using BenchRunner.Instruments.Dialects;
using Stated = BenchRunner.Acceptance.Dialects.WireHabits;
using WireHabits = BenchRunner.Instruments.Dialects.WireHabits;

namespace BenchRunner.Runner.Benches;

/// <summary>Makes of a dialect file, which Acceptance reads, the dialect that Instruments speaks.</summary>
public static class DialectMapping
{
    /// <summary>The dialect of a file.</summary>
    public static Dialect ToDialect(this DialectFile file)
    {
        ArgumentNullException.ThrowIfNull(file);
        return new Dialect(file.Name, file.Identity, file.Commands) { Wire = Habits(file.Wire) };
    }

    private static WireHabits Habits(Stated stated) => new()
    {
        Terminator = stated.Terminator switch
        {
            "CR NL" => Terminator.CarriageReturnNewLine,
            "CR" => Terminator.CarriageReturn,
            _ => Terminator.NewLine,
        },
        ErrorQuery = stated.ErrorQuery,
        HasOperationComplete = stated.HasOperationComplete,
        ReopensToRecover = stated.ReopensToRecover,
        Echoes = stated.Echoes,
        BlockBefore = stated.BlockBefore,
        BlockHasEnd = stated.BlockHasEnd,
        Numbered = stated.Numbered,
    };
}
