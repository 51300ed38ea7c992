using FakeBench.Instruments;
using FakeBench.Scpi;

namespace FakeBench.Hosting;

/// <summary>Serves one instrument as a serial device: one client, since a serial line has one other end.</summary>
/// <remarks>Firmware that starts anew loses its reply and its settings here, and no connection: there is none.</remarks>
public sealed class SerialHost : IHost
{
    private const int LookEvery = 50;
    private const int WriteWithin = 500;

    // A client that polls is never silent for so long.
    private const int SilentLooks = 4;
    private readonly Instrument _instrument;
    private readonly PseudoTerminal _terminal = PseudoTerminal.Open();
    private readonly TimeProvider _time;
    private readonly CancellationTokenSource _stop = new();
    private readonly Thread _thread;

    /// <summary>Opens the device and starts to serve.</summary>
    /// <param name="instrument">The instrument.</param>
    /// <param name="time">The clock of replies that come late or in pieces.</param>
    /// <exception cref="IOException">The system has no pseudo-terminal to give.</exception>
    public SerialHost(Instrument instrument, TimeProvider time)
    {
        (_instrument, _time) = (instrument, time);
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
        _stop.Cancel();
        _thread.Join();
        _terminal.Dispose();
        _stop.Dispose();
        return ValueTask.CompletedTask;
    }

    private void Serve()
    {
        var framer = new MessageFramer();
        byte[] buffer = new byte[4096];
        int silent = 0;
        bool isDeaf = false;
        try
        {
            while (!_stop.IsCancellationRequested)
            {
                int count = _terminal.Read(buffer, LookEvery);
                silent = count > 0 ? 0 : silent + 1;
                if (silent == SilentLooks)
                {
                    _terminal.EndExclusive();
                }

                foreach (string? message in isDeaf ? [] : framer.Take(buffer.AsSpan(0, count)))
                {
                    Answer answer = _instrument.Obey(message);
                    isDeaf |= answer.Deaf;
                    Reply(answer);
                }
            }
        }
        catch (OperationCanceledException)
        {
            // The bench ends while a reply is due.
        }
        catch (IOException failure)
        {
            Console.Error.WriteLine($"serial device {Path}: {failure.Message}");
        }
    }

    private void Reply(Answer answer)
    {
        Wait(answer.Late);
        int piece = answer.Piece > 0 ? answer.Piece : Math.Max(answer.Bytes.Length, 1);
        foreach (byte[] bytes in answer.Bytes.Chunk(piece))
        {
            _terminal.Write(bytes, WriteWithin);
            Wait(answer.Piece > 0 ? answer.Gap : TimeSpan.Zero);
        }
    }

    private void Wait(TimeSpan span)
    {
        if (span > TimeSpan.Zero)
        {
            Task.Delay(span, _time, _stop.Token).GetAwaiter().GetResult();
        }
    }
}
