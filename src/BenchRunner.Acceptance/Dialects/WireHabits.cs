namespace BenchRunner.Acceptance.Dialects;

/// <summary>What an instrument does otherwise on the wire than a SCPI instrument by the standard, as its dialect file
/// says it.</summary>
/// <param name="Terminator">What ends a message: <c>NL</c>, <c>CR NL</c> or <c>CR</c>.</param>
/// <param name="ErrorQuery">The question for the oldest entry of the error queue; null: it has none.</param>
/// <param name="HasOperationComplete">Whether it knows <c>*OPC?</c>; asked only where there is no error
/// queue.</param>
/// <param name="ReopensToRecover">Whether a doubtful link is opened again, as the instrument knows no
/// <c>*ESE</c>.</param>
/// <param name="Echoes">Whether it sends back each message before it answers.</param>
/// <param name="BlockBefore">What it writes before the <c>#</c> of a block; empty: nothing.</param>
/// <param name="BlockHasEnd">Whether it ends a block with its terminator.</param>
/// <param name="Numbered">Whether what safety reads is asked with a number that the reply brings back, and with the
/// power-on bit of the event register.</param>
public sealed record WireHabits(
    string Terminator,
    string? ErrorQuery,
    bool HasOperationComplete,
    bool ReopensToRecover,
    bool Echoes,
    string BlockBefore,
    bool BlockHasEnd,
    bool Numbered)
{
    /// <summary>The question for the error queue by the standard (SCPI-1999 volume 2, 21.8).</summary>
    public const string StandardErrorQuery = "SYSTem:ERRor?";

    /// <summary>By the standard.</summary>
    public static WireHabits Standard { get; } = new("NL", StandardErrorQuery, true, false, false, "", true, false);
}
