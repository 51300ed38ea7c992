using System.Diagnostics;

namespace EndToEnd;

/// <summary>A disk in memory that can be filled up.</summary>
internal sealed class SmallDisk : IDisposable
{
    private SmallDisk(string folder) => Folder = folder;

    public string Folder { get; }

    /// <summary>Mounts it; skips the test where that is not allowed.</summary>
    public static SmallDisk MountOrSkip(string folder)
    {
        Directory.CreateDirectory(folder);
        if (!OperatingSystem.IsLinux()
            || Run("mount", "-t", "tmpfs", "-o", "size=256m,mode=777", "none", folder) != 0)
        {
            Assert.Skip("only who may mount a disk can fill one up");
        }

        return new SmallDisk(folder);
    }

    /// <summary>Leaves no room.</summary>
    public void Fill()
    {
        using FileStream filler = File.Create(Path.Combine(Folder, "filler"));
        byte[] block = new byte[4096];
        try
        {
            while (true)
            {
                filler.Write(block);
                filler.Flush();
            }
        }
        catch (IOException)
        {
            // Full.
        }
    }

    public void Dispose() => Run("umount", "--lazy", Folder);

    private static int Run(string program, params string[] arguments)
    {
        using Process process = Process.Start(program, arguments);
        process.WaitForExit();
        return process.ExitCode;
    }
}
