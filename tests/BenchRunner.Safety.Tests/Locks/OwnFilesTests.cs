using BenchRunner.Acceptance.Files;
using BenchRunner.Safety.Latches;
using BenchRunner.Safety.Locks;

namespace BenchRunner.Safety.Tests.Locks;

/// <summary>Lock and latch are the lab's own files, and never written through a link.</summary>
public sealed class OwnFilesTests : IDisposable
{
    private readonly TemporaryFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void Lock_and_latch_are_for_their_owner_and_group_alone()
    {
        Assert.SkipWhen(OperatingSystem.IsWindows(), "rights of a file come from its folder there");
        using BenchLock? held = BenchLock.TryTake(_folder.File("lab.yaml"), DateTimeOffset.UnixEpoch, out _);
        new LatchFile(_folder.File("lab.yaml")).Set(DateTimeOffset.UnixEpoch, "tried");

        Assert.All(["lab.lock", "lab.lock-holder", "lab.latch"], name => Assert.Equal(
            UnixFileMode.None, new FileInfo(_folder.File(name)).UnixFileMode & ~OwnFile.Mode));
    }

    [Fact]
    public void A_link_in_the_locks_place_holds_the_bench_and_is_named()
    {
        Assert.SkipWhen(OperatingSystem.IsWindows(), "links want a privilege there");
        File.CreateSymbolicLink(_folder.File("lab.lock"), _folder.File("elsewhere"));

        Assert.Null(BenchLock.TryTake(_folder.File("lab.yaml"), DateTimeOffset.UnixEpoch, out string? holder));

        Assert.Contains("symbolic link", holder, StringComparison.Ordinal);
        Assert.False(File.Exists(_folder.File("elsewhere")));
    }

    [Fact]
    public void A_link_in_the_latchs_place_stands_as_a_latch_and_is_not_written_through()
    {
        Assert.SkipWhen(OperatingSystem.IsWindows(), "links want a privilege there");
        File.CreateSymbolicLink(_folder.File("lab.latch"), _folder.File("elsewhere"));
        var latch = new LatchFile(_folder.File("lab.yaml"));

        Assert.Contains("symbolic link", latch.Read(), StringComparison.Ordinal);
        Assert.Throws<IOException>(() => latch.Set(DateTimeOffset.UnixEpoch, "tried"));
        Assert.False(File.Exists(_folder.File("elsewhere")));
    }
}
