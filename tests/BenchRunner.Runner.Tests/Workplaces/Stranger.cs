using System.Net.Sockets;
using System.Text;
using BenchRunner.Instruments.Links;

namespace BenchRunner.Runner.Tests.Workplaces;

/// <summary>Somebody else at the supply: another program, or a hand at its front panel.</summary>
internal static class Stranger
{
    /// <summary>Switches the supply on; the bus rises after that.</summary>
    public static async Task Charges(string supply, double volts)
    {
        CancellationToken cancel = TestContext.Current.CancellationToken;
        LinkAddress address = LinkAddress.Parse(supply);
        using var client = new TcpClient();
        await client.ConnectAsync(address.Host, address.Number, cancel);
        string message = FormattableString.Invariant($"VOLT:PROT 900;:CURR 2.5;:VOLT {volts};:OUTP ON\n");
        await client.GetStream().WriteAsync(Encoding.ASCII.GetBytes(message), cancel);
    }
}
