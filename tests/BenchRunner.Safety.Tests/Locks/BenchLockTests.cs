using BenchRunner.Safety.Locks;

namespace BenchRunner.Safety.Tests.Locks;

public sealed class BenchLockTests : IDisposable
{
    private static readonly DateTimeOffset Noon = new(2026, 12, 1, 12, 0, 0, TimeSpan.Zero);
    private readonly TemporaryFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void A_second_run_gets_no_lock_and_is_told_who_holds_it()
    {
        using BenchLock? first = BenchLock.TryTake(_folder.File("lab.yaml"), Noon, out _);

        Assert.Null(BenchLock.TryTake(_folder.File("lab.yaml"), Noon, out string? holder));
        Assert.Equal($"process {Environment.ProcessId} since 2026-12-01T12:00:00Z", holder);
    }

    [Fact]
    public void A_lock_is_free_again_when_its_run_has_ended()
    {
        BenchLock.TryTake(_folder.File("lab.yaml"), Noon, out _)!.Dispose();

        using BenchLock? next = BenchLock.TryTake(_folder.File("lab.yaml"), Noon, out string? holder);
        Assert.NotNull(next);
        Assert.Null(holder);
    }

    [Fact]
    public void Two_benches_do_not_hinder_each_other()
    {
        using BenchLock? one = BenchLock.TryTake(_folder.File("one.yaml"), Noon, out _);
        using BenchLock? other = BenchLock.TryTake(_folder.File("other.yaml"), Noon, out _);

        Assert.NotNull(one);
        Assert.NotNull(other);
    }
}
