using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Tests.Files;
using BenchRunner.Acceptance.Tolerances;

namespace BenchRunner.Acceptance.Tests.Tolerances;

public sealed class TolerancesFileTests
{
    /// <summary>Common practice, no source: peak current 0.6 %, trr 0.9 %, three peaks 3.5, 3 and 2 %.</summary>
    [Fact]
    public void The_shipped_file_holds_common_practice_and_says_so()
    {
        ToleranceSet shipped = TolerancesFile.Read(Repository.TolerancesPath).Value!;

        Assert.Equal(
            [
                ("id_peak_on", 0.006), ("trr", 0.009), ("vds_high_peak_1", 0.035), ("vds_high_peak_2", 0.03),
                ("vds_high_peak_3", 0.02),
            ],
            shipped.Limits.Select(limit => (limit.Quantity, limit.Within)));
        Assert.Contains("common practice, no source", shipped.Basis, StringComparison.Ordinal);
        Assert.All(shipped.Limits, limit => Assert.Null(limit.Definition));
    }

    [Fact]
    public void A_definition_goes_with_its_tolerance()
    {
        Read<ToleranceSet> read = TolerancesFile.Read(Readers.Source("tolerances.yaml", """
            format: 1
            tolerances: ours
            basis: our model report
            limits:
              - { quantity: qrr, definition: qrr/window-100ns, within: 0.05 }
            """));

        Assert.Empty(read.Problems);
        Tolerance limit = Assert.Single(read.Value!.Limits);
        Assert.Equal(("qrr", "qrr/window-100ns", 0.05), (limit.Quantity, limit.Definition, limit.Within));
        Assert.Equal(5, limit.Where.Line);
    }
}
