using FakeBench.Instruments;
using FakeBench.Scpi;

namespace FakeBench.Hosting;

/// <summary>Serves one instrument as a serial device: one client, since a serial line has one other end.</summary>
public sealed class SerialHost : IHost
{
    private const int LookEvery = 50;
    private const int WriteWithin = 500;

    // A client that polls is never silent for so long.
    private const int SilentLooks = 4;
    private readonly Instrument _instrument;
    private readonly PseudoTerminal _terminal = PseudoTerminal.Open();
    private readonly Thread _thread;
    private volatile bool _stop;

    /// <summary>Opens the device and starts to serve.</summary>
    /// <exception cref="IOException">The system has no pseudo-terminal to give.</exception>
    public SerialHost(Instrument instrument)
    {
        _instrument = instrument;
        _thread = new Thread(Serve) { IsBackground = true, Name = "serial" };
        _thread.Start();
    }

    /// <summary>Path of the device.</summary>
    public string Path => _terminal.Path;

    /// <inheritdoc/>
    public string Link => $"serial {Path}";

    /// <inheritdoc/>
    public ValueTask DisposeAsync()
    {
        _stop = true;
        _thread.Join();
        _terminal.Dispose();
        return ValueTask.CompletedTask;
    }

    private void Serve()
    {
        var framer = new MessageFramer();
        byte[] buffer = new byte[4096];
        int silent = 0;
        try
        {
            while (!_stop)
            {
                int count = _terminal.Read(buffer, LookEvery);
                silent = count > 0 ? 0 : silent + 1;
                if (silent == SilentLooks)
                {
                    _terminal.EndExclusive();
                }

                foreach (string? message in framer.Take(buffer.AsSpan(0, count)))
                {
                    byte[] reply = _instrument.Obey(message).Bytes;
                    if (reply.Length > 0)
                    {
                        _terminal.Write(reply, WriteWithin);
                    }
                }
            }
        }
        catch (IOException failure)
        {
            Console.Error.WriteLine($"serial device {Path}: {failure.Message}");
        }
    }
}
