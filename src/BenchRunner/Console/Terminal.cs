using System.Runtime.InteropServices;
using System.Text;
using Microsoft.Win32.SafeHandles;

namespace BenchRunner.Console;

/// <summary>The terminal that a person sits at, whatever standard input is: a list of serials or a scanner is no
/// person.</summary>
internal sealed partial class Terminal : IDisposable
{
    private const string Device = "/dev/tty";
    private const int FlushInputLinux = 0;
    private const int FlushInputMac = 1;
    private readonly FileStream? _device;

    private Terminal(FileStream? device) => _device = device;

    /// <summary>Opens the terminal; null where there is none.</summary>
    public static Terminal? Open()
    {
        if (OperatingSystem.IsWindows())
        {
            return System.Console.IsInputRedirected ? null : new Terminal(null);
        }

        try
        {
            return new Terminal(
                new FileStream(Device, FileMode.Open, FileAccess.ReadWrite, FileShare.ReadWrite, bufferSize: 0));
        }
        catch (Exception none) when (none is IOException or UnauthorizedAccessException)
        {
            return null;
        }
    }

    /// <summary>Throws away what was typed before, so that keys or scans that waited answer nothing.</summary>
    public void DiscardWaiting()
    {
        if (_device is null)
        {
            while (System.Console.KeyAvailable)
            {
                System.Console.ReadKey(intercept: true);
            }

            return;
        }

        if (Flush(_device.SafeFileHandle, OperatingSystem.IsMacOS() ? FlushInputMac : FlushInputLinux) != 0)
        {
            throw new IOException("what was typed before the question cannot be discarded; nothing is armed");
        }
    }

    /// <summary>Puts a question on the terminal, wherever standard output goes.</summary>
    public void Ask(string question)
    {
        if (_device is null)
        {
            System.Console.Error.WriteLine(question);
            return;
        }

        _device.Write(Encoding.UTF8.GetBytes(question + "\n"));
    }

    /// <summary>Reads one line; null at its end.</summary>
    public Task<string?> ReadLine(CancellationToken cancel) =>
        Task.Run(() => _device is null ? System.Console.ReadLine() : Line(_device), CancellationToken.None).WaitAsync(
            cancel);

    public void Dispose() => _device?.Dispose();

    // A byte at a time: the person's next line is not ours to take.
    private static string? Line(FileStream device)
    {
        var line = new List<char>();
        while (device.ReadByte() is var read && read >= 0 && read != '\n')
        {
            line.Add((char)read);
        }

        return line.Count == 0 ? null : string.Concat(line).Trim();
    }

    [LibraryImport("libc", EntryPoint = "tcflush", SetLastError = true)]
    private static partial int Flush(SafeFileHandle terminal, int queue);
}
