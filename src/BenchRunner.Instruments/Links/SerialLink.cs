using System.IO.Ports;

namespace BenchRunner.Instruments.Links;

/// <summary>A link over a serial line: 8 data bits, no parity, one stop bit, no flow control.</summary>
/// <remarks>
/// The modem lines are never touched: a pseudo terminal has none, and raising DTR resets some instruments. The port of
/// an unplugged adapter stays "open": its pending read ends with an exception that says closed, which is link lost
/// here.
/// </remarks>
internal sealed class SerialLink : ILink
{
    private readonly Lock _writing = new();
    private readonly SerialPort _port;

    private SerialLink(string name, SerialPort port)
    {
        Name = name;
        _port = port;
    }

    public string Name { get; }

    public bool HasInput
    {
        get
        {
            try
            {
                return _port.BytesToRead > 0;
            }
            catch (Exception e) when (IsLoss(e))
            {
                throw Lost(e);
            }
        }
    }

    public static ILink Open(LinkAddress address, TimeSpan writeWithin)
    {
        var port = new SerialPort(address.Host, address.Number, Parity.None, 8, StopBits.One)
        {
            ReadTimeout = SerialPort.InfiniteTimeout,
            WriteTimeout = (int)writeWithin.TotalMilliseconds,
        };
        try
        {
            port.Open();
            port.DiscardInBuffer();
            return new SerialLink(address.ToString(), port);
        }
        catch (Exception e) when (IsLoss(e) || e is ArgumentException)
        {
            port.Dispose();
            throw new LinkException(
                address.ToString(), "cannot open the port; check that it exists, is free and may be used by you", e);
        }
    }

    public void Write(ReadOnlySpan<byte> message)
    {
        lock (_writing)
        {
            try
            {
                _port.BaseStream.Write(message);
            }
            catch (Exception e) when (IsLoss(e))
            {
                throw Lost(e);
            }
        }
    }

    public async ValueTask<int> Read(Memory<byte> buffer, CancellationToken cancel)
    {
        try
        {
            return await _port.BaseStream.ReadAsync(buffer, cancel);
        }
        catch (Exception e) when (IsLoss(e))
        {
            throw Lost(e);
        }
    }

    public void Dispose() => _port.Dispose();

    private static bool IsLoss(Exception e) =>
        e is IOException or InvalidOperationException or UnauthorizedAccessException or TimeoutException;

    private LinkException Lost(Exception e) => new(Name, $"serial line lost: {e.Message}", e);
}
