using System.Runtime.InteropServices;
using System.Text;
using Microsoft.Win32.SafeHandles;

namespace BenchRunner.Console;

/// <summary>The terminal that a person sits at, whatever standard input is: a list of serials or a scanner on a line of
/// its own is no person.</summary>
internal sealed partial class Terminal : IDisposable
{
    private const string Device = "/dev/tty";
    private const int FlushInputLinux = 0;
    private const int FlushInputMac = 1;
    private const int StandardInput = 0;
    private readonly FileStream? _device;
    private readonly List<byte> _line = [];

    private Terminal(FileStream? device) => _device = device;

    /// <summary>Whether standard input is this very terminal: then scanner and person type into one line.</summary>
    public static bool IsStandardInput => OperatingSystem.IsWindows()
        ? !System.Console.IsInputRedirected
        : ForegroundOf(StandardInput) >= 0;

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
        _line.Clear();
        if (_device is null)
        {
            while (System.Console.KeyAvailable)
            {
                System.Console.ReadKey(intercept: true);
            }

            return;
        }

        // A program in the background may not touch what was typed; the system would stop it.
        if (!IsOurs() || Flush(Handle, OperatingSystem.IsMacOS() ? FlushInputMac : FlushInputLinux) != 0)
        {
            throw new IOException("what was typed before the question cannot be discarded; nothing is armed");
        }
    }

    /// <summary>Puts a line on the terminal, wherever standard output goes.</summary>
    public void Write(string line)
    {
        if (_device is null)
        {
            System.Console.Error.WriteLine(line);
            return;
        }

        _device.Write(Encoding.UTF8.GetBytes(line + "\n"));
    }

    /// <summary>Takes a line that was typed, without waiting for one.</summary>
    /// <param name="line">The line without blanks around it; null: the person has left (end of file).</param>
    /// <returns>False where none is there.</returns>
    /// <exception cref="IOException">The terminal is gone.</exception>
    public bool TryTake(out string? line)
    {
        line = null;
        return _device is null ? TakeKeys(ref line) : TakeBytes(_device, ref line);
    }

    public void Dispose() => _device?.Dispose();

    private bool TakeBytes(FileStream device, ref string? line)
    {
        // A byte at a time: the line after this one may belong to a question not yet put.
        while (IsOurs() && IsReadable())
        {
            int read = device.ReadByte();
            if (read >= 0 && read != '\n')
            {
                _line.Add((byte)read);
                continue;
            }

            line = read < 0 && _line.Count == 0 ? null : Encoding.UTF8.GetString([.. _line]).Trim();
            _line.Clear();
            return true;
        }

        return false;
    }

    private bool TakeKeys(ref string? line)
    {
        while (System.Console.KeyAvailable)
        {
            char key = System.Console.ReadKey().KeyChar;
            switch (key)
            {
                case '\r' or '\n':
                    line = Encoding.UTF8.GetString([.. _line]).Trim();
                    _line.Clear();
                    return true;
                case '\u001a':
                    return true;
                case '\b':
                    _line.RemoveRange(Math.Max(_line.Count - 1, 0), Math.Min(_line.Count, 1));
                    break;
                default:
                    _line.AddRange(Encoding.UTF8.GetBytes([key]));
                    break;
            }
        }

        return false;
    }

    private SafeFileHandle Handle => _device!.SafeFileHandle;

    private bool IsOurs() => ForegroundOf(Handle.DangerousGetHandle().ToInt32()) == OwnGroup();

    private bool IsReadable()
    {
        var look = new Look { File = Handle.DangerousGetHandle().ToInt32(), Wanted = Look.Input };
        return Poll(ref look, 1, 0) > 0;
    }

    [StructLayout(LayoutKind.Sequential)]
    private struct Look
    {
        public const short Input = 1;
        public int File;
        public short Wanted;
        public short Found;
    }

    [LibraryImport("libc", EntryPoint = "tcflush", SetLastError = true)]
    private static partial int Flush(SafeFileHandle terminal, int queue);

    [LibraryImport("libc", EntryPoint = "poll", SetLastError = true)]
    private static partial int Poll(ref Look look, nuint count, int milliseconds);

    [LibraryImport("libc", EntryPoint = "tcgetpgrp", SetLastError = true)]
    private static partial int ForegroundOf(int terminal);

    [LibraryImport("libc", EntryPoint = "getpgrp")]
    private static partial int OwnGroup();
}
