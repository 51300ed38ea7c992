using System.Net.Sockets;
using System.Text;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>One client of a scripted instrument, with the line it has just sent.</summary>
internal sealed class Visitor(TcpClient client, int visit, string message)
{
    private bool _holds;

    /// <summary>The line.</summary>
    public string Message { get; } = message;

    /// <summary>What stands after the header.</summary>
    public string Argument => Message[(Message.IndexOf(' ', StringComparison.Ordinal) + 1)..];

    /// <summary>1 for the first connection.</summary>
    public int Visit { get; } = visit;

    /// <summary>What was said in answer to a unit of a longer message, without its end.</summary>
    public string Held { get; private set; } = "";

    /// <summary>The same client with one unit of its message, whose reply is held.</summary>
    public Visitor For(string unit) => new(client, Visit, unit) { _holds = true };

    public Task Line(string text)
    {
        if (_holds)
        {
            Held = text;
            return Task.CompletedTask;
        }

        return Raw(Encoding.UTF8.GetBytes(text + "\n"));
    }

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
