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

    /// <summary>Refuses a run that could fill the disk: twice what it needs at most must be free.</summary>
    /// <exception cref="InputException">Less is free.</exception>
    public static void RequireSpace(string file, long bytesADevice)
    {
        string folder = Path.GetDirectoryName(Path.GetFullPath(file)) ?? ".";
        if (!Directory.Exists(folder))
        {
            throw new InputException($"{file}: its folder does not exist; make it or name another file");
        }

        long free = new DriveInfo(folder).AvailableFreeSpace;
        if (free < 2 * bytesADevice)
        {
            throw new InputException(
                $"{file}: a device needs up to {bytesADevice / 1e6:0.0} MB of evidence and {free / 1e6:0.0} MB are "
                    + $"free there, "
                    + "expected twice as much; make room or name a file on another disk");
        }
    }

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
