using BenchRunner.Acceptance.Validity;
using CsCheck;

namespace BenchRunner.Acceptance.Tests.Validity;

public sealed class WidthCorrectionTests
{
    [Fact]
    public void A_small_error_is_corrected_in_proportion() =>
        Assert.Equal(7.6e-6, WidthCorrection.Next(8e-6, 8e-6, 38, 40)!.Value, 1e-15);

    [Fact]
    public void A_capture_moves_the_width_by_a_tenth_at_most() =>
        Assert.Equal(8.8e-6, WidthCorrection.Next(8e-6, 8e-6, 40, 33)!.Value, 1e-15);

    [Theory]
    [InlineData(40, 4)]
    [InlineData(40, 31)]
    [InlineData(40, 60)]
    [InlineData(40, 0)]
    [InlineData(40, -40)]
    [InlineData(40, double.NaN)]
    public void An_error_beyond_a_quarter_in_all_has_no_correction(double target, double seen) =>
        Assert.Null(WidthCorrection.Next(8e-6, 8e-6, target, seen));

    [Fact]
    public void No_row_of_corrections_leaves_its_bounds() =>
        Gen.Double[0.3, 3].Array[1, 30].Sample(ratios =>
        {
            double width = 8e-6;
            foreach (double ratio in ratios)
            {
                if (WidthCorrection.Next(8e-6, width, 40, 40 * ratio) is { } next)
                {
                    Assert.InRange(next / width, 0.9 - 1e-12, 1.1 + 1e-12);
                    width = next;
                }

                Assert.InRange(width / 8e-6, 0.75 - 1e-12, 1.25 + 1e-12);
            }
        });
}
