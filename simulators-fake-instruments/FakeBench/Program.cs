using System.Runtime.InteropServices;
using FakeBench.Faults;
using FakeBench.Hosting;
using FakeBench.Population;

namespace FakeBench;

/// <summary>The command <c>FakeBench</c>: <c>serve</c>, <c>faults</c>, <c>devices</c>.</summary>
public static class Program
{
    private const int WrongInput = 2;
    private static readonly TimeSpan SettleWithin = TimeSpan.FromSeconds(60);
    private static readonly TimeSpan LookEvery = TimeSpan.FromMilliseconds(20);

    private const string Help = """
        FakeBench: a simulated half bridge with instruments that speak SCPI.

          serve [options]   starts the instruments, prints a line for each link, then 'ready'
            --device SERIAL       device in the socket (W1200-0001)
            --companion SERIAL    fills the other place; the device and its companion are single parts then
            --load positive|negative  rail of the load; negative: the high place fires (positive)
            --sound               named devices come without their defect
            --seed N              seed of population, noise and jitter (1)
            --pace X              how much faster charging and bleeding are than in the lab, 1 to 5 (1)
            --bits 8|12           converter of the scope (12)
            --channels A,B,...    channels on the scope's inputs 1, 2, ...
            --links tcp|hislip    how the instruments are reached (tcp)
            --interlock serial|tcp  how the interlock is reached: serial, or like the others (serial where there are
                                  pseudo-terminals)
            --hotplate            the devices lie on a hotplate
            --ambient DEGC        temperature of the room (23)
            --fault NAME[@WHEN]   a fault; may repeat; WHEN is fire:N, volts:V, seconds:S or block:N
            --write-bench FILE    writes a bench file that reaches the instruments
            --exchange none|by-hand  how devices are exchanged, as the bench file says it (none)
            --ends-with-input     ends when standard input has ended, nobody is connected and the bank is down
                                  (after 60 s at the latest), and ignores a terminal's interrupts
            --say-states          says when all outputs go off or on and the bank passes 60 V, with the machine's
                                  monotonic time in seconds: state outputs-off 1234.5678
          faults            lists the faults, a line each
          devices           lists the named devices as CSV

        While it serves, standard input is the operator's hands:
          open, insert SERIAL, close, stop (emergency stop), release

        Example: FakeBench serve --device W1200-0001 --pace 5 --fault interlock-opens@fire:3
        """;

    private static async Task<int> Main(string[] arguments)
    {
        try
        {
            switch (arguments)
            {
                case []:
                case var asked when asked.Contains("--help"):
                    Console.Out.WriteLine(Help);
                    return 0;
                case ["serve", .. var options]:
                    await Serve(Arguments.Parse(options));
                    return 0;
                case ["faults"]:
                    ListFaults();
                    return 0;
                case ["devices"]:
                    ListDevices();
                    return 0;
                default:
                    throw new FormatException($"'{arguments[0]}': expected serve, faults or devices; see --help");
            }
        }
        catch (Exception wrong) when (wrong is FormatException or IOException or UnauthorizedAccessException)
        {
            Console.Error.WriteLine($"fakebench: {wrong.Message}");
            return WrongInput;
        }
    }

    private static async Task Serve(ServeOptions options)
    {
        using var stop = new CancellationTokenSource();
        List<PosixSignalRegistration> signals = [On(PosixSignal.SIGTERM, stop, ends: true)];
        foreach (PosixSignal signal in (PosixSignal[])[PosixSignal.SIGINT, PosixSignal.SIGHUP, PosixSignal.SIGQUIT])
        {
            signals.Add(On(signal, stop, ends: !options.EndsWithInput));
        }

        await using var server = new BenchServer(options, TimeProvider.System);
        foreach ((string role, string link) in server.Links)
        {
            Console.Out.WriteLine($"{role} {link}");
        }

        if (options.WriteBench is { } file)
        {
            await File.WriteAllTextAsync(file, BenchFile.Write(options, server.Links), stop.Token);
        }

        Console.Out.WriteLine("ready");
        using var told = new CancellationTokenSource();
        Task telling = options.SayStates
            ? StateTeller.Tell(server, Console.Out, TimeProvider.System, told.Token) : Task.CompletedTask;
        await Hands(server, options.EndsWithInput, stop.Token);
        if (options.EndsWithInput)
        {
            await Settle(server, stop.Token);
        }

        await told.CancelAsync();
        await telling;
        signals.ForEach(s => s.Dispose());
    }

    private static PosixSignalRegistration On(PosixSignal signal, CancellationTokenSource stop, bool ends) =>
        PosixSignalRegistration.Create(signal, context =>
        {
            context.Cancel = true;
            if (ends)
            {
                stop.Cancel();
            }
        });

    // Reading the console cannot be cancelled, so the reader is left behind when the program ends.
    private static async Task Hands(BenchServer server, bool endsWithInput, CancellationToken stop)
    {
        var ended = new TaskCompletionSource();
        await using CancellationTokenRegistration cancelled = stop.Register(() => ended.TrySetResult());
        var reader = new Thread(() =>
        {
            while (Console.In.ReadLine() is { } line)
            {
                if (!string.IsNullOrWhiteSpace(line) && server.Do(line) is { } refusal)
                {
                    Console.Error.WriteLine($"fakebench: {refusal}");
                }
            }

            if (endsWithInput)
            {
                ended.TrySetResult();
            }
        })
        { IsBackground = true, Name = "hands" };
        reader.Start();
        await ended.Task;
    }

    // Whoever started it may have died with the bank full: a guardian then still needs the instruments.
    private static async Task Settle(BenchServer server, CancellationToken stop)
    {
        using var limit = new CancellationTokenSource(SettleWithin, TimeProvider.System);
        using var either = CancellationTokenSource.CreateLinkedTokenSource(limit.Token, stop);
        try
        {
            while (server.Clients > 0 || !server.Look().IsDown)
            {
                await Task.Delay(LookEvery, TimeProvider.System, either.Token);
            }
        }
        catch (OperationCanceledException)
        {
            // Long enough.
        }
    }

    private static void ListFaults()
    {
        foreach (FaultKind fault in FaultCatalogue.All)
        {
            Console.Out.WriteLine($"{fault.Name,-20} {fault.Begins,-10} {fault.Shows}");
        }
    }

    private static void ListDevices()
    {
        Console.Out.WriteLine("serial,part,defect,expected_outcome,change");
        foreach (Device device in DevicePopulation.Named)
        {
            string[] fields =
                [device.Serial, device.Part, device.Defect ?? "", device.ExpectedOutcome, device.Change];
            Console.Out.WriteLine(string.Join(',', fields));
        }
    }
}
