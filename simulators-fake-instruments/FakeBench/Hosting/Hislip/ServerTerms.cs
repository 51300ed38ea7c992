namespace FakeBench.Hosting.Hislip;

/// <summary>What servers differ in.</summary>
public sealed record ServerTerms
{
    /// <summary>Sessions served at once.</summary>
    public int MostClients { get; init; } = 4;

    /// <summary>The longest message taken from a client, header included, bytes.</summary>
    public ulong LongestMessage { get; init; } = 1UL << 20;

    /// <summary>Whether sessions start in overlapped mode.</summary>
    public bool PrefersOverlapped { get; init; }

    /// <summary>Whether only encrypted sessions are served (protocol version 2.0); none is then, since this server has
    /// no encryption.</summary>
    public bool EncryptionMandatory { get; init; }
}
