using System.Diagnostics;
using System.Runtime.InteropServices;

namespace FakeBench.Tests.Hosting;

public sealed partial class ProgramTests
{
    private const int Interrupt = 2;
    private const int Terminate = 15;
    private static readonly TimeSpan Patience = TimeSpan.FromSeconds(60);

    [Fact]
    public async Task It_prints_its_links_takes_the_hands_and_ends_with_its_input()
    {
        using Process bench = Start("serve", "--ends-with-input", "--pace", "5");
        Dictionary<string, string> links = await Links(bench);
        Assert.Equal(["supply", "pulser", "scope", "voltmeter", "interlock"], links.Keys);
        await using (Client interlock = await Client.Connect(links["interlock"]))
        {
            await bench.StandardInput.WriteLineAsync("open");
            string said = "";
            for (int i = 0; i < 100_000 && said != "0,0,1,0"; i++)
            {
                said = await interlock.Ask("SENS:DATA?");
            }

            Assert.Equal("0,0,1,0", said);
        }

        bench.StandardInput.Close();
        Assert.Equal(0, await Ended(bench));
    }

    [Fact]
    public async Task Hands_exchange_a_device_while_the_bench_file_says_by_hand()
    {
        string file = Path.Combine(Path.GetTempPath(), $"fakebench-{Guid.NewGuid():N}.yaml");
        using Process bench = Start(
            "serve", "--ends-with-input", "--exchange", "by-hand", "--device", "W1200-9009", "--write-bench", file);
        Dictionary<string, string> links = await Links(bench);
        string written = await File.ReadAllTextAsync(file, TestContext.Current.CancellationToken);
        Assert.Contains("exchange: by-hand", written, StringComparison.Ordinal);
        File.Delete(file);
        await using (Client interlock = await Client.Connect(links["interlock"]))
        await using (Client supply = await Client.Connect(links["supply"]))
        {
            await Charge(interlock, supply);
            await Until(supply, "2", "STAT:QUES:COND?"); // a short: the supply is in current limit
            await Hand("insert W1200-0001"); // refused: the enclosure is closed
            await Hand("open");
            await Until(interlock, "0,0,1,0");
            await Hand("insert W1200-0001");
            await Hand("close");
            await Until(interlock, "1,0,1,0");
            await Charge(interlock, supply);
            await Until(supply, "0", "STAT:QUES:COND?");
        }

        bench.StandardInput.Close();
        Assert.Equal(0, await Ended(bench));
        Assert.Contains(
            "open it first",
            await bench.StandardError.ReadToEndAsync(TestContext.Current.CancellationToken),
            StringComparison.Ordinal);

        Task Hand(string hand) => bench.StandardInput.WriteLineAsync(hand);

        static async Task Charge(Client interlock, Client supply)
        {
            await interlock.Say("OUTP 0");
            Assert.Equal("0", await interlock.Ask("OUTP?"));
            await supply.Say("VOLT 48;:OUTP 1");
            Assert.Equal("1", await supply.Ask("OUTP?"));
        }

        static async Task Until(Client client, string wanted, string question = "SENS:DATA?")
        {
            string said = "";
            for (int i = 0; i < 100_000 && said != wanted; i++)
            {
                said = await client.Ask(question);
            }

            Assert.Equal(wanted, said);
        }
    }

    [Fact]
    public async Task Started_by_a_run_it_ignores_an_interrupt_and_ends_on_a_request_to_end()
    {
        Assert.SkipUnless(PosixSignals, "signals of POSIX");
        using Process bench = Start("serve", "--ends-with-input");
        Dictionary<string, string> links = await Links(bench);
        Assert.Equal(0, Kill(bench.Id, Interrupt));
        await using (Client supply = await Client.Connect(links["supply"]))
        {
            Assert.Contains("SUPPLY", await supply.Ask("*IDN?"), StringComparison.Ordinal);
        }

        Assert.Equal(0, Kill(bench.Id, Terminate));
        Assert.Equal(0, await Ended(bench));
    }

    [Fact]
    public async Task Started_by_hand_it_outlives_its_input_and_ends_on_an_interrupt()
    {
        Assert.SkipUnless(PosixSignals, "signals of POSIX");
        using Process bench = Start("serve");
        Dictionary<string, string> links = await Links(bench);
        bench.StandardInput.Close();
        await using (Client supply = await Client.Connect(links["supply"]))
        {
            Assert.Contains("SUPPLY", await supply.Ask("*IDN?"), StringComparison.Ordinal);
        }

        Assert.Equal(0, Kill(bench.Id, Interrupt));
        Assert.Equal(0, await Ended(bench));
    }

    [Fact]
    public async Task It_lists_faults_and_devices()
    {
        string faults = await Output("faults");
        Assert.True(faults.Split('\n', StringSplitOptions.RemoveEmptyEntries).Length >= 8);
        Assert.Contains("bus-stays-up", faults, StringComparison.Ordinal);
        string devices = await Output("devices");
        Assert.StartsWith("serial,part,defect,expected_outcome,change", devices, StringComparison.Ordinal);
        Assert.Contains(
            "W1200-9005,WD-1200S-25,leaky,rejected,low.leakage x2000", devices, StringComparison.Ordinal);
        Assert.Contains("W1200-9020,WD-1200S-25,,accepted,", devices, StringComparison.Ordinal);
        Assert.All(
            devices.Split('\n', StringSplitOptions.RemoveEmptyEntries),
            row => Assert.Equal(5, row.Split(',').Length));
    }

    [Fact]
    public async Task A_wrong_argument_is_told_on_the_error_stream()
    {
        using Process bench = Start("serve", "--pace", "9");
        Assert.Equal(2, await Ended(bench));
        Assert.Contains("--pace: '9'", await bench.StandardError.ReadToEndAsync(TestContext.Current.CancellationToken),
            StringComparison.Ordinal);
    }

    private static bool PosixSignals => OperatingSystem.IsLinux() || OperatingSystem.IsMacOS();

    private static Process Start(params string[] arguments)
    {
        string name = OperatingSystem.IsWindows() ? "FakeBench.exe" : "FakeBench";
        return Process.Start(new ProcessStartInfo(Path.Combine(AppContext.BaseDirectory, name), arguments)
        {
            RedirectStandardInput = true,
            RedirectStandardOutput = true,
            RedirectStandardError = true,
        })!;
    }

    private static async Task<Dictionary<string, string>> Links(Process bench)
    {
        var links = new Dictionary<string, string>();
        while (await bench.StandardOutput.ReadLineAsync().WaitAsync(Patience, TimeProvider.System) is { } line)
        {
            if (line == "ready")
            {
                return links;
            }

            string[] words = line.Split(' ', 2);
            links[words[0]] = words[1];
        }

        throw new InvalidOperationException("It ended before it was ready.");
    }

    private static async Task<int> Ended(Process bench)
    {
        await bench.WaitForExitAsync().WaitAsync(Patience, TimeProvider.System);
        return bench.ExitCode;
    }

    private static async Task<string> Output(string command)
    {
        using Process bench = Start(command);
        string output = await bench.StandardOutput.ReadToEndAsync().WaitAsync(Patience, TimeProvider.System);
        Assert.Equal(0, await Ended(bench));
        return output;
    }

    [LibraryImport("libc", EntryPoint = "kill")]
    private static partial int Kill(int process, int signal);
}
