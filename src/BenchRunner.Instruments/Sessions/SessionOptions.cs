using BenchRunner.Instruments.Dialects;

namespace BenchRunner.Instruments.Sessions;

/// <summary>The bounds of a session: every wait has one.</summary>
public sealed record SessionOptions
{
    /// <summary>For connections that are polled for safety: a poll without its reply is a doubt soon and at once, not a
    /// reason to ask again. Setting down is tried as often as elsewhere.</summary>
    public static SessionOptions Watching { get; } = new() { ReplyWithin = TimeSpan.FromSeconds(2), ReadAttempts = 1 };

    /// <summary>What the instrument does otherwise on the wire; a dialect says it.</summary>
    public WireHabits Habits { get; init; } = WireHabits.Standard;

    /// <summary>How long connecting may take.</summary>
    public TimeSpan ConnectWithin { get; init; } = TimeSpan.FromSeconds(3);

    /// <summary>How many times connecting is tried, with growing pauses; at least 1.</summary>
    public int ConnectAttempts { get; init; } = 3;

    /// <summary>The pause after the first failed attempt; doubled after each further one.</summary>
    public TimeSpan ConnectPause { get; init; } = TimeSpan.FromMilliseconds(100);

    /// <summary>How long handing one message to the system may take. A permit being revoked waits at most that
    /// long.</summary>
    public TimeSpan WriteWithin { get; init; } = TimeSpan.FromSeconds(1);

    /// <summary>The one deadline of an exchange: from the command to the end of its reply.</summary>
    public TimeSpan ReplyWithin { get; init; } = TimeSpan.FromSeconds(2);

    /// <summary>Slowest transfer of a block that is waited for, bytes a second; its time is added to the deadline
    /// once the
    /// block's head has come.</summary>
    public double BlockRate { get; init; } = 1e6;

    /// <summary>How long a link must be silent before a resynchronisation believes that nothing more is under
    /// way.</summary>
    public TimeSpan Silence { get; init; } = TimeSpan.FromMilliseconds(100);

    /// <summary>How many times a question is asked whose reply was lost; at least 1. Never applied to what energises,
    /// fires or sets.</summary>
    public int ReadAttempts { get; init; } = 2;

    /// <summary>How many times setting down is tried; at least 1.</summary>
    public int SetDownAttempts { get; init; } = 3;

    /// <summary>Whether a broken link is opened again for reading and setting down. Energising is refused ever
    /// after.</summary>
    public bool Reconnect { get; init; } = true;

    /// <summary>Whether an instrument is refused whose error queue, when the link is opened, speaks of its own hardware.
    /// Never for links that only make safe: a doubtful supply is switched off all the same.</summary>
    public bool RefuseHardwareErrors { get; init; }

    /// <summary>The lock taken on a link that has locks (HiSLIP), so that no second controller changes a setting: empty
    /// for this connection alone, a name shared by all connections that give the same one; null: none.</summary>
    public string? Lock { get; init; }
}
