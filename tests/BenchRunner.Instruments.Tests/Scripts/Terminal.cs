using System.Runtime.InteropServices;
using System.Text;
using Microsoft.Win32.SafeHandles;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>A pseudo terminal: its far side is a serial port for the program, this side is the instrument's. Linux
/// only.</summary>
internal sealed partial class Terminal : IDisposable
{
    private const int ReadWrite = 2;
    private const int NoControllingTerminal = 0x100;
    private const int CloseOnExec = 0x80000;

    private readonly SafeFileHandle _handle;
    private readonly FileStream _stream;
    private readonly FileStream _farSide;

    public Terminal()
    {
        var master = posix_openpt(ReadWrite | NoControllingTerminal | CloseOnExec);
        Assert.True(master >= 0 && grantpt(master) == 0 && unlockpt(master) == 0, "no pseudo terminal");
        var name = new byte[128];
        Assert.Equal(0, ptsname_r(master, name, name.Length));
        Path = Encoding.ASCII.GetString(name, 0, Array.IndexOf(name, (byte)0));

        // Kept open, so that this side does not fail between two clients; raw, so that the terminal itself echoes
        // nothing.
        _farSide = new FileStream(Path, FileMode.Open, FileAccess.ReadWrite);
        var attributes = new byte[256];
        var far = (int)_farSide.SafeFileHandle.DangerousGetHandle();
        Assert.Equal(0, tcgetattr(far, attributes));
        cfmakeraw(attributes);
        Assert.Equal(0, tcsetattr(far, 0, attributes));
        _handle = new SafeFileHandle(master, ownsHandle: true);
        _stream = new FileStream(_handle, FileAccess.ReadWrite, bufferSize: 0);
    }

    public string Path { get; }

    /// <summary>Blocks until bytes come. A thread that waits here ends only when the far side says something.</summary>
    public int Read(byte[] buffer) => _stream.Read(buffer);

    public void Write(ReadOnlySpan<byte> bytes) => _stream.Write(bytes);

    public void Dispose()
    {
        _farSide.Dispose();
        _handle.Dispose();
    }

    [LibraryImport("libc")]
    private static partial int posix_openpt(int flags);

    [LibraryImport("libc")]
    private static partial int grantpt(int handle);

    [LibraryImport("libc")]
    private static partial int unlockpt(int handle);

    [LibraryImport("libc")]
    private static partial int ptsname_r(int handle, byte[] name, nint length);

    [LibraryImport("libc")]
    private static partial int tcgetattr(int handle, byte[] attributes);

    [LibraryImport("libc")]
    private static partial void cfmakeraw(byte[] attributes);

    [LibraryImport("libc")]
    private static partial int tcsetattr(int handle, int when, byte[] attributes);
}
