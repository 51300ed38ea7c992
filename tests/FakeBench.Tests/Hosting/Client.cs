using System.Globalization;
using System.Net.Sockets;
using System.Text;

namespace FakeBench.Tests.Hosting;

/// <summary>A plain client of one instrument: any stream, lines and blocks, every wait bounded.</summary>
internal sealed class Client(Stream stream, IDisposable? owner = null) : IAsyncDisposable
{
    private static readonly TimeSpan Patience = TimeSpan.FromSeconds(60);

    public static async Task<Client> Connect(string link)
    {
        string[] words = link.Split(' ');
        if (words[0] == "serial")
        {
            return new Client(new FileStream(words[1], FileMode.Open, FileAccess.ReadWrite, FileShare.ReadWrite, 0));
        }

        var tcp = new TcpClient { NoDelay = true };
        await tcp.ConnectAsync(words[1], int.Parse(words[2], CultureInfo.InvariantCulture));
        return new Client(tcp.GetStream(), tcp);
    }

    public async Task Say(string message) => await Send(Encoding.Latin1.GetBytes(message + "\n"));

    public async Task Send(byte[] bytes)
    {
        await stream.WriteAsync(bytes);
        await stream.FlushAsync();
    }

    public async Task<string> Ask(string message)
    {
        await Say(message);
        return await Line();
    }

    public Task<string> Line() => Until('\n');

    public async Task<string> Until(char end)
    {
        var line = new StringBuilder();
        while (await Byte() is var next && next != end)
        {
            line.Append((char)next);
        }

        return line.ToString();
    }

    public async Task<byte[]> Block(string message)
    {
        await Say(message);
        Assert.Equal('#', (char)await Byte());
        int digits = await Byte() - '0';
        int count = 0;
        for (int i = 0; i < digits; i++)
        {
            count = (10 * count) + (await Byte() - '0');
        }

        byte[] block = new byte[count];
        await stream.ReadExactlyAsync(block).AsTask().WaitAsync(Patience, TimeProvider.System);
        Assert.Equal('\n', (char)await Byte());
        return block;
    }

    /// <summary>Whether the other end has closed: end of stream or a reset.</summary>
    public async Task<bool> IsClosed()
    {
        try
        {
            byte[] one = new byte[1];
            return await stream.ReadAsync(one).AsTask().WaitAsync(Patience, TimeProvider.System) == 0;
        }
        catch (IOException)
        {
            return true;
        }
    }

    public async ValueTask DisposeAsync()
    {
        await stream.DisposeAsync();
        owner?.Dispose();
    }

    private async Task<byte> Byte()
    {
        byte[] one = new byte[1];
        await stream.ReadExactlyAsync(one).AsTask().WaitAsync(Patience, TimeProvider.System);
        return one[0];
    }
}
