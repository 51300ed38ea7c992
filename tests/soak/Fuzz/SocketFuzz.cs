using System.Net;
using System.Net.Sockets;
using System.Text;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Soak.Fuzz;

/// <summary>A session with an instrument on a real socket that answers nonsense.</summary>
internal static class SocketFuzz
{
    private static readonly SessionOptions _options = new()
    {
        ReplyWithin = TimeSpan.FromMilliseconds(250),
        Silence = TimeSpan.FromMilliseconds(2),
        ConnectPause = TimeSpan.FromMilliseconds(1),
        ReadAttempts = 1,
    };

    /// <summary>Longest end of one exchange: resynchronising and reconnecting counted, and a loaded computer
    /// allowed for. A hang is what it finds.</summary>
    private static readonly TimeSpan _longest = TimeSpan.FromSeconds(30);

    /// <summary>Runs it.</summary>
    public static async Task Run(ulong seed, int count, List<string> failures)
    {
        using var instrument = new Babbler(seed);
        ScpiSession? session = null;
        for (int number = 0; number < count && failures.Count < FuzzRun.MostFailures; number++)
        {
            using var hang = new CancellationTokenSource(_longest);
            try
            {
                session ??= await ScpiSession.Open(
                    "scope", LinkAddress.Parse($"tcp 127.0.0.1 {instrument.Port}"), _options, TimeProvider.System,
                    Silent.Log, hang.Token);
                string question = FormattableString.Invariant($"FUZZ{number}?");
                _ = (number % 4) switch
                {
                    0 => await session.AskBlock(question, 64, b => b.Length, hang.Token),
                    1 => (await session.Ask(question, ReplyIdentity.Parse, hang.Token)).Text.Length,
                    2 => (await session.Ask(question, b => ReplyList.Elements(b), hang.Token)).Count,
                    _ => await session.Ask(question, ReplyNumber.Parse, hang.Token),
                };
            }
            catch (LinkException)
            {
                // Documented: late, malformed or lost. The next exchange must find its way.
            }
            catch (Exception e)
            {
                failures.Add(FormattableString.Invariant($"seed {seed}, socket message {number}: ")
                    + (hang.IsCancellationRequested ? $"no end within {_longest.TotalSeconds} s" : e.ToString()));
                session?.Dispose();
                session = null;
            }
        }

        session?.Dispose();
    }

    private sealed class Silent : IInstrumentLog
    {
        public static Silent Log { get; } = new();

        public void Report(InstrumentEvent what)
        {
        }
    }

    /// <summary>Answers what a session needs to live, and each FUZZn? with message n, mostly with a newline.</summary>
    private sealed class Babbler : IDisposable
    {
        private const int RarelyWithoutEnd = 50;

        private readonly TcpListener _listener = new(IPAddress.Loopback, 0);
        private readonly ulong _seed;

        public Babbler(ulong seed)
        {
            _seed = seed;
            _listener.Start();
            new Thread(Serve) { IsBackground = true }.Start();
        }

        public int Port => ((IPEndPoint)_listener.LocalEndpoint).Port;

        public void Dispose() => _listener.Dispose();

        private void Serve()
        {
            try
            {
                while (true)
                {
                    TcpClient client = _listener.AcceptTcpClient();
                    new Thread(() => Talk(client)) { IsBackground = true }.Start();
                }
            }
            catch (Exception e) when (e is SocketException or InvalidOperationException)
            {
                // The run is over.
            }
        }

        private void Talk(TcpClient client)
        {
            using TcpClient held = client;
            client.NoDelay = true;
            var messages = new Messages(_seed);
            var buffer = new byte[Messages.Longest + 1];
            try
            {
                using var lines = new StreamReader(client.GetStream(), Encoding.ASCII);
                while (lines.ReadLine() is { } line)
                {
                    client.GetStream().Write(Answer(line, messages, buffer));
                }
            }
            catch (Exception e) when (e is IOException or ObjectDisposedException or InvalidOperationException)
            {
                // The session has opened another link.
            }
        }

        private static ReadOnlySpan<byte> Answer(string line, Messages messages, byte[] buffer)
        {
            if (line.StartsWith("FUZZ", StringComparison.Ordinal))
            {
                int length = messages.Make(long.Parse(line.AsSpan()[4..^1], null), buffer);
                buffer[length] = (byte)'\n';
                return buffer.AsSpan(0, length + (messages.Below(RarelyWithoutEnd) == 0 ? 0 : 1));
            }

            return Encoding.ASCII.GetBytes(line switch
            {
                "*IDN?" => "MAKER,BABBLER,1,1\n",
                "SYSTem:ERRor?" => "0,\"No error\"\n",
                _ when line.EndsWith(";*ESE?", StringComparison.Ordinal) => line[5..^6] + "\n",
                _ => "",
            });
        }
    }
}
