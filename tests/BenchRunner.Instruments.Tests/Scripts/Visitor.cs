using System.Net.Sockets;
using System.Text;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>One client of a scripted instrument, with the line it has just sent.</summary>
internal sealed class Visitor(TcpClient client, int visit, string message)
{
    /// <summary>The line.</summary>
    public string Message { get; } = message;

    /// <summary>What stands after the header.</summary>
    public string Argument => Message[(Message.IndexOf(' ', StringComparison.Ordinal) + 1)..];

    /// <summary>1 for the first connection.</summary>
    public int Visit { get; } = visit;

    public Task Line(string text) => Raw(Encoding.UTF8.GetBytes(text + "\n"));

    public async Task Raw(ReadOnlyMemory<byte> bytes) => await client.GetStream().WriteAsync(bytes);

    public Task Raw(string text) => Raw(Encoding.UTF8.GetBytes(text));

    /// <summary>Ends the connection so that the client's next write fails.</summary>
    public void Reset()
    {
        client.LingerState = new LingerOption(true, 0);
        client.Close();
    }

    /// <summary>Ends the stream as an instrument does that is switched off.</summary>
    public Task HangUp()
    {
        client.Dispose();
        return Task.CompletedTask;
    }
}
