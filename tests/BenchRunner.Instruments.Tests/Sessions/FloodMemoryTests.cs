using System.Text;
using BenchRunner.Instruments.Links;

namespace BenchRunner.Instruments.Tests.Sessions;

/// <summary>Memory while an instrument attacks it. Runs alone: what the whole process allocates is counted.</summary>
/// <remarks>Source: tests/reference/scpi/faults.json, attacks A01 and A03 (house rules).</remarks>
[Collection(nameof(FloodMemoryTests))]
[CollectionDefinition(nameof(FloodMemoryTests), DisableParallelization = true)]
public sealed class FloodMemoryTests : SessionFixture
{
    private const int Flood = 100_000_000;

    // The row for A03 says 1 MiB; sockets, tasks and messages of one exchange are far below it.
    private const long Most = 1 << 20;

    [Fact]
    public async Task A_hundred_megabytes_without_an_end_leave_memory_flat()
    {
        using var session = await Open(Options with { Reconnect = false });
        byte[] chunk = new byte[64 * 1024];
        Array.Fill(chunk, (byte)'1');
        long sent = 0;
        var ended = new TaskCompletionSource();
        Instrument.Once("A?", async visitor =>
        {
            try
            {
                for (; sent < Flood; sent += chunk.Length)
                {
                    await visitor.Raw(chunk);
                }
            }
            catch (IOException)
            {
                // The link was dropped, as it is to be.
            }
            finally
            {
                ended.SetResult();
            }
        });
        long before = GC.GetTotalAllocatedBytes(precise: true);

        await Assert.ThrowsAsync<LinkException>(() => Ask(session, "A?"));
        await Assert.ThrowsAsync<LinkException>(() => Ask(session, "B?"));
        await ended.Task.WaitAsync(Cancel);

        Assert.InRange(GC.GetTotalAllocatedBytes(precise: true) - before, 0, Most);
        Assert.True(sent < Flood, "the instrument could send all of it");
    }

    [Theory]
    [InlineData("#9999999999")]
    [InlineData("#9000001025")] // one more than is due
    public async Task An_announced_length_is_refused_from_its_digits_before_memory_is_taken(string head)
    {
        using var session = await Open(Options with { Reconnect = false });
        Instrument.Once("D?", visitor => visitor.Raw(Encoding.ASCII.GetBytes(head)));
        long before = GC.GetTotalAllocatedBytes(precise: true);

        await Assert.ThrowsAsync<LinkException>(() => AskBlock(session));

        Assert.InRange(GC.GetTotalAllocatedBytes(precise: true) - before, 0, Most);
    }
}
