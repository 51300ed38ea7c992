namespace BenchRunner.Files;

/// <summary>The evidence file that a command means where it names none.</summary>
internal static class EvidenceFiles
{
    /// <summary>Evidence of real benches.</summary>
    public const string Measured = "bench-evidence.db";

    /// <summary>Evidence of benches that <c>run</c> starts itself.</summary>
    public const string Simulated = "simulated-evidence.db";

    /// <summary>The file to write to.</summary>
    public static string ToWrite(string? given, bool simulated) => given ?? (simulated ? Simulated : Measured);

    /// <summary>The file to read: the only one of the two in the working folder.</summary>
    /// <exception cref="InputException">Both are there, or neither.</exception>
    public static string ToRead(string? given) => (given, File.Exists(Measured), File.Exists(Simulated)) switch
    {
        ({ } named, _, _) => named,
        (null, true, false) => Measured,
        (null, false, true) => Simulated,
        (null, true, true) => throw new InputException(
            $"{Measured} and {Simulated} are both here; say which with --evidence"),
        _ => throw new InputException($"neither {Measured} nor {Simulated} is here; name the file with --evidence"),
    };
}
