using System.Diagnostics;

namespace EndToEnd;

/// <summary>A named pipe that is kept full: who writes to it waits.</summary>
internal sealed class FullPipe : IDisposable
{
    private readonly FileStream _pipe;
    private volatile bool _isDrained;

    public FullPipe(string path)
    {
        Make(path);

        // To read and to write: opening waits for nobody then.
        _pipe = new FileStream(path, FileMode.Open, FileAccess.ReadWrite, FileShare.ReadWrite, bufferSize: 0);
        new Thread(Fill) { IsBackground = true }.Start();
    }

    /// <summary>Makes a pipe that nobody reads: who opens it to write waits.</summary>
    public static void Make(string path)
    {
        using Process made = Process.Start("mkfifo", ["--mode=666", path]);
        made.WaitForExit();
        Assert.Equal(0, made.ExitCode);
    }

    /// <summary>From now on somebody reads.</summary>
    public void Drain()
    {
        _isDrained = true;
        new Thread(Read) { IsBackground = true }.Start();
    }

    public void Dispose() => _pipe.Dispose();

    private void Fill()
    {
        try
        {
            while (!_isDrained)
            {
                _pipe.WriteByte((byte)'\n');
            }
        }
        catch (Exception over) when (over is IOException or ObjectDisposedException)
        {
            // The test is over.
        }
    }

    private void Read()
    {
        byte[] buffer = new byte[1 << 16];
        try
        {
            while (_pipe.Read(buffer) > 0)
            {
                // Nobody needs it.
            }
        }
        catch (Exception over) when (over is IOException or ObjectDisposedException)
        {
            // The test is over.
        }
    }
}
