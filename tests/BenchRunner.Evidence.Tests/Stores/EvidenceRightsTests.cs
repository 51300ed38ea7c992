using BenchRunner.Acceptance.Files;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests.Stores;

/// <summary>Who may read the evidence, and that nothing is written through a link that somebody laid.</summary>
public sealed class EvidenceRightsTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void Every_file_of_the_evidence_is_for_its_owner_and_group_alone()
    {
        Assert.SkipWhen(OperatingSystem.IsWindows(), "rights of a file come from its folder there");
        using EvidenceStore store = EvidenceStore.Open(_folder.File, TimeProvider.System);

        string[] files = Directory.GetFiles(_folder.Folder);
        Assert.Contains(files, file => file.EndsWith("-wal", StringComparison.Ordinal));
        Assert.All(files, file => Assert.Equal(
            UnixFileMode.None, new FileInfo(file).UnixFileMode & ~OwnFile.Mode));
    }

    [Theory]
    [InlineData(true)]
    [InlineData(false)]
    public void A_link_at_the_evidences_place_is_refused_and_what_it_leads_to_stays(bool dangles)
    {
        Assert.SkipWhen(OperatingSystem.IsWindows(), "links want a privilege there");
        string target = Path.Combine(_folder.Folder, "somebody-elses.txt");
        if (!dangles)
        {
            File.WriteAllText(target, "");
        }

        File.CreateSymbolicLink(_folder.File, target);

        var refused = Assert.Throws<EvidenceException>(() => EvidenceStore.Open(_folder.File, TimeProvider.System));

        Assert.Contains($"is a symbolic link to {target}", refused.Message, StringComparison.Ordinal);
        Assert.Equal(!dangles, File.Exists(target) && new FileInfo(target).Length == 0);
    }
}
