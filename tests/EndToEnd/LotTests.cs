using System.IO.Compression;
using System.Text.Json;

namespace EndToEnd;

/// <summary>Devices of a lot: attempts, duplicates, and what becomes of a device after its runs.</summary>
public sealed class LotTests : IDisposable
{
    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_device_is_decided_once_in_its_lot_unless_somebody_says_why_again()
    {
        string[] job = ["run", Workplace.Sequence, "--device", "W1200-0001", "--lot", "L-1"];
        (await _place.Run(job)).Expect(0);

        Finished twice = (await _place.Run(job)).Expect(2);
        Assert.Contains("W1200-0001 is accepted in lot L-1 already", twice.Error, StringComparison.Ordinal);
        Assert.DoesNotContain("charging the bus", twice.Output, StringComparison.Ordinal);
        Assert.Equal(1, _place.Ask<long>("select count(*) from run"));

        (await _place.Run([.. job, "--again", "contact was dirty"])).Expect(0);
        Assert.Equal(2, _place.Ask<long>("select attempt from device_outcomes where current"));
        Assert.Equal("contact was dirty", _place.Ask<string>("select again from run where attempt = 2"));

        Finished thrice = (await _place.Run([.. job, "--again", "still dirty"])).Expect(2);
        Assert.Contains("had 2 attempts in lot L-1", thrice.Error, StringComparison.Ordinal);
        Assert.Equal(1, _place.Ask<long>("select devices from lot_yield"));
        Assert.Equal(1.0, _place.Ask<double>("select first_pass_yield from lot_yield"));
        (await _place.Run("audit")).Expect(0);
    }

    [Fact]
    public async Task A_reason_to_measure_again_without_a_lot_is_refused()
    {
        Finished run = (await _place.Run(
            "run", Workplace.Sequence, "--device", "W1200-0001", "--again", "contact was dirty")).Expect(2);
        Assert.Contains("name the lot", run.Error, StringComparison.Ordinal);
        Assert.Equal(0, _place.Ask<long>("select count(*) from run"));
    }

    [Fact]
    public async Task A_note_is_stored_sealed_and_told_and_changes_no_outcome()
    {
        TakeEvidence();
        string[] note =
        [
            "evidence", "note", "--device", "W1200-0002", "--lot", "L-1", "--kind", "scrap", "--by", "K. Weber",
            "--because", "lead bent", "--json",
        ];
        List<object[]> before = _place.Rows("select * from device_outcomes");
        Finished added = (await _place.Run(note)).Expect(0);

        using JsonDocument document = JsonDocument.Parse(added.Output);
        Assert.Equal("scrap", document.RootElement.GetProperty("kind").GetString());
        Assert.Equal(
            document.RootElement.GetProperty("seal").GetString(),
            _place.Ask<string>("select seal from seal order by ordinal desc limit 1"));
        Finished told = (await _place.Run("query", "notes", "--lot", "L-1", "--csv")).Expect(0);
        Assert.Contains("W1200-0002,L-1,scrap,K. Weber,lead bent", told.Output, StringComparison.Ordinal);
        Assert.Equal(before, _place.Rows("select * from device_outcomes"));
        (await _place.Run("audit")).Expect(0);
    }

    [Theory]
    [InlineData("W1200-0009", "scrap", "K. Weber", "W1200-0009 has no run in lot L-1")]
    [InlineData("W1200-0002", "sold", "K. Weber", "expected release, scrap, return or concession")]
    [InlineData("W1200-0002", "scrap", "", "who says so is empty")]
    public async Task A_note_that_cannot_be_is_refused_with_one_clear_message(
        string device, string kind, string by, string said)
    {
        TakeEvidence();
        Finished refused = (await _place.Run(
            "evidence", "note", "--device", device, "--lot", "L-1", "--kind", kind, "--by", by, "--because", "x"))
            .Expect(2);
        Assert.Contains(said, refused.Error, StringComparison.Ordinal);
        Assert.Equal("", refused.Output);
    }

    [Fact]
    public async Task A_note_makes_no_evidence_file()
    {
        Finished refused = (await _place.Run(
            "evidence", "note", "--device", "W1200-0002", "--lot", "L-1", "--kind", "scrap", "--by", "K. Weber",
            "--because", "x", "--evidence", "none.db")).Expect(2);
        Assert.Contains("none.db", refused.Error, StringComparison.Ordinal);
        Assert.False(File.Exists(_place.Path("none.db")));
    }

    /// <summary>A file with two devices in lot L-1, written by an earlier program.</summary>
    private void TakeEvidence()
    {
        string packed = Workplace.Repository("tests", "BenchRunner.Evidence.Tests", "Older", "format-1.db.gz");
        using var whole = new GZipStream(File.OpenRead(packed), CompressionMode.Decompress);
        using FileStream file = File.Create(_place.Evidence);
        whole.CopyTo(file);
    }
}
