using System.Runtime.InteropServices;
using System.Text;
using Microsoft.Win32.SafeHandles;

namespace FakeBench.Hosting;

/// <summary>A pseudo-terminal: what is written to its device is read here, and the other way round.</summary>
/// <remarks>
/// The device is opened here once and kept open, so that a client that leaves does not end it. It is raw: no echo, no
/// translation of line ends. Linux; macOS by construction (flags from its headers, from memory, not run there).
/// </remarks>
public sealed partial class PseudoTerminal : IDisposable
{
    private const int Interrupted = 4;
    private const short ReadyToRead = 1;
    private const short ReadyToWrite = 4;
    private const int SizeOfSettings = 256;
    private readonly SafeFileHandle _master;
    private readonly SafeFileHandle _device;

    private PseudoTerminal(SafeFileHandle master, SafeFileHandle device, string path) =>
        (_master, _device, Path) = (master, device, path);

    /// <summary>Path of the device, e.g. <c>/dev/pts/7</c>.</summary>
    public string Path { get; }

    /// <summary>Whether the system has pseudo-terminals.</summary>
    public static bool IsSupported => OperatingSystem.IsLinux() || OperatingSystem.IsMacOS();

    /// <summary>Opens one.</summary>
    /// <exception cref="IOException">The system has none to give.</exception>
    public static PseudoTerminal Open()
    {
        const int readWrite = 2;
        (int noControl, int closeOnExec) = OperatingSystem.IsMacOS() ? (0x20000, 0x1000000) : (0x100, 0x80000);
        int flags = readWrite | noControl | closeOnExec;
        var master = new SafeFileHandle(Check(posix_openpt(flags), "posix_openpt"), ownsHandle: true);
        Check(grantpt(Number(master)), "grantpt");
        Check(unlockpt(Number(master)), "unlockpt");
        byte[] name = new byte[256];
        Check(ptsname_r(Number(master), name, (nuint)name.Length) == 0 ? 0 : -1, "ptsname_r");
        string path = Encoding.ASCII.GetString(name, 0, Array.IndexOf(name, (byte)0));
        var device = new SafeFileHandle(Check(open(path, flags), "open"), ownsHandle: true);
        byte[] settings = new byte[SizeOfSettings];
        Check(tcgetattr(Number(device), settings), "tcgetattr");
        cfmakeraw(settings);
        Check(tcsetattr(Number(device), 0, settings), "tcsetattr");
        return new PseudoTerminal(master, device, path);
    }

    /// <summary>Reads what has come.</summary>
    /// <param name="buffer">Receives it.</param>
    /// <param name="milliseconds">How long to wait for the first byte.</param>
    /// <returns>Bytes read; 0: nothing came in that time.</returns>
    /// <exception cref="IOException">The terminal is broken.</exception>
    public int Read(byte[] buffer, int milliseconds)
    {
        ArgumentNullException.ThrowIfNull(buffer);
        if (!Wait(ReadyToRead, milliseconds))
        {
            return 0;
        }

        return (int)Check(read(Number(_master), buffer, (nuint)buffer.Length), "read");
    }

    /// <summary>Writes all bytes, unless nobody takes them.</summary>
    /// <param name="bytes">The bytes.</param>
    /// <param name="milliseconds">How long to wait for room; what does not go out by then is lost, as on a real
    /// line.</param>
    /// <exception cref="IOException">The terminal is broken.</exception>
    public void Write(byte[] bytes, int milliseconds)
    {
        ArgumentNullException.ThrowIfNull(bytes);
        int sent = 0;
        while (sent < bytes.Length && Wait(ReadyToWrite, milliseconds))
        {
            byte[] rest = bytes[sent..];
            sent += (int)Check(write(Number(_master), rest, (nuint)rest.Length), "write");
        }
    }

    /// <summary>Lets another client open the device.</summary>
    /// <remarks>A client takes a serial line for itself alone. Of a real line the system takes that back when the client dies;
    /// this device is kept open here, so that it would stay for good.</remarks>
    public void EndExclusive()
    {
        if (OperatingSystem.IsLinux())
        {
            const nuint noExclusive = 0x540D;
            _ = ioctl(Number(_device), noExclusive, 0);
        }
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        _device.Dispose();
        _master.Dispose();
    }

    private bool Wait(short events, int milliseconds)
    {
        var wait = new Waiting { Descriptor = (int)Number(_master), Events = events };
        int ready = poll(ref wait, 1, milliseconds);
        if (ready < 0 && Marshal.GetLastPInvokeError() == Interrupted)
        {
            return false;
        }

        return Check(ready, "poll") > 0;
    }

    private static nint Number(SafeFileHandle handle) => handle.DangerousGetHandle();

    private static nint Check(nint result, string call) => result >= 0
        ? result
        : throw new IOException($"{call}: {Marshal.GetLastPInvokeErrorMessage()}");

    [StructLayout(LayoutKind.Sequential)]
    private struct Waiting
    {
        public int Descriptor;
        public short Events;
        public short Happened;
    }

    [LibraryImport("libc", SetLastError = true)]
    private static partial int posix_openpt(int flags);

    [LibraryImport("libc", SetLastError = true)]
    private static partial int grantpt(nint descriptor);

    [LibraryImport("libc", SetLastError = true)]
    private static partial int unlockpt(nint descriptor);

    [LibraryImport("libc", SetLastError = true)]
    private static partial int ptsname_r(nint descriptor, [Out] byte[] name, nuint length);

    [LibraryImport("libc", SetLastError = true, StringMarshalling = StringMarshalling.Utf8)]
    private static partial int open(string path, int flags);

    [LibraryImport("libc", SetLastError = true)]
    private static partial int tcgetattr(nint descriptor, [Out] byte[] settings);

    [LibraryImport("libc", SetLastError = true)]
    private static partial int tcsetattr(nint descriptor, int when, byte[] settings);

    [LibraryImport("libc")]
    private static partial void cfmakeraw([In, Out] byte[] settings);

    [LibraryImport("libc", SetLastError = true)]
    private static partial int poll(ref Waiting waiting, nuint count, int milliseconds);

    [LibraryImport("libc", SetLastError = true)]
    private static partial int ioctl(nint descriptor, nuint request, nint argument);

    [LibraryImport("libc", SetLastError = true)]
    private static partial nint read(nint descriptor, [Out] byte[] buffer, nuint count);

    [LibraryImport("libc", SetLastError = true)]
    private static partial nint write(nint descriptor, byte[] buffer, nuint count);
}
