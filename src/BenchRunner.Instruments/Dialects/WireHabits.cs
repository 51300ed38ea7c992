namespace BenchRunner.Instruments.Dialects;

/// <summary>What an instrument does otherwise on the wire than the standard says; obeyed by its session.</summary>
public sealed record WireHabits
{
    /// <summary>By the standard.</summary>
    public static WireHabits Standard { get; } = new();

    /// <summary>What ends a message.</summary>
    public Terminator Terminator { get; init; }

    /// <summary>The question for the oldest entry of the error queue; null: it has none, so that only a read-back tells
    /// whether a setting was taken.</summary>
    public string? ErrorQuery { get; init; } = "SYSTem:ERRor?";

    /// <summary>Whether it knows <c>*OPC?</c>, asked after a setting where there is no error queue.</summary>
    public bool HasOperationComplete { get; init; } = true;

    /// <summary>Whether a link in doubt is opened again, as the instrument knows no <c>*ESE</c> to find out what it
    /// answers.</summary>
    public bool ReopensToRecover { get; init; }

    /// <summary>Whether it sends back each message before it answers.</summary>
    public bool Echoes { get; init; }

    /// <summary>What it writes before the <c>#</c> of a block, ASCII; empty: nothing.</summary>
    public string BlockBefore { get; init; } = "";

    /// <summary>Whether it ends a block with its terminator.</summary>
    public bool BlockHasEnd { get; init; } = true;

    /// <summary>Whether it takes several units in one message and knows <c>*ESE</c> and <c>*ESR?</c>, so that what
    /// safety reads is asked with a number that the reply must bring back.</summary>
    public bool Numbered { get; init; }
}
