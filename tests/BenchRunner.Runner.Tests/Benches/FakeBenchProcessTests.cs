using System.Diagnostics;
using System.Net.Sockets;
using System.Runtime.CompilerServices;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Instruments.Links;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Tests.Workplaces;

namespace BenchRunner.Runner.Tests.Benches;

public sealed class FakeBenchProcessTests : IDisposable
{
    private readonly Workplace _place = new();

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task Every_role_has_a_link_that_listens_and_none_is_left_after_the_end()
    {
        FakeBenchProcess fake = await FakeBenchProcess.Start(
            _place.Bench(), Workplace.Device, null, TimeProvider.System, Cancel);
        await using (fake)
        {
            Assert.Equal(
                ["interlock", "pulser", "scope", "supply", "voltmeter"], fake.Links.Keys.Order(StringComparer.Ordinal));
            Assert.True(await Listens(fake.Links["supply"]));
            Assert.True(await Listens(fake.Links["scope"]));
        }

        Assert.False(await Listens(fake.Links["supply"]));
    }

    [Fact]
    public async Task Hands_at_a_bench_that_has_ended_by_itself_are_said_so()
    {
        await using FakeBenchProcess fake =
            await FakeBenchProcess.Start(_place.Bench(), Workplace.Device, null, TimeProvider.System, Cancel);
        Process program = Program(fake);
        program.Kill();
        await program.WaitForExitAsync(Cancel);

        await Assert.ThrowsAsync<BenchException>(() => fake.Do("open", Cancel));
    }

    [Fact]
    public async Task A_bench_that_cannot_start_is_said_at_once()
    {
        Bench bench =
            _place.Bench(("fake: { seed: 1, pace: 5 }", "fake: { seed: 1, pace: 5, faults: ['no-such-fault'] }"));

        var failure = await Assert.ThrowsAsync<BenchException>(
            () => FakeBenchProcess.Start(bench, Workplace.Device, null, TimeProvider.System, Cancel));

        Assert.Contains("ended before it was ready", failure.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_start_that_is_cancelled_is_no_fault_of_the_bench()
    {
        using var stop = new CancellationTokenSource();
        await stop.CancelAsync();

        await Assert.ThrowsAnyAsync<OperationCanceledException>(
            () => FakeBenchProcess.Start(_place.Bench(), Workplace.Device, null, TimeProvider.System, stop.Token));
    }

    [Fact]
    public async Task A_bench_without_a_fake_block_is_a_callers_mistake()
    {
        Bench bench = _place.Bench() with { Fake = null };

        await Assert.ThrowsAsync<ArgumentException>(
            () => FakeBenchProcess.Start(bench, Workplace.Device, null, TimeProvider.System, Cancel));
    }

    /// <summary>The process itself, which nobody but a test has a reason to end.</summary>
    [UnsafeAccessor(UnsafeAccessorKind.Field, Name = "_process")]
    private static extern ref Process Program(FakeBenchProcess fake);

    private static async Task<bool> Listens(string link)
    {
        LinkAddress address = LinkAddress.Parse(link);
        using var client = new TcpClient();
        try
        {
            await client.ConnectAsync(address.Host, address.Number, Cancel);
            return true;
        }
        catch (SocketException)
        {
            return false;
        }
    }
}
