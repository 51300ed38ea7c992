using System.Globalization;
using BenchRunner.Acceptance.Files;
using CsCheck;

namespace BenchRunner.Acceptance.Tests.Files;

public sealed class SiTextTests
{
    // Prefixes and their powers: the SI Brochure, 9th edition, table 7.
    private static readonly (string Prefix, int Power)[] _prefixes =
        [("f", -15), ("p", -12), ("n", -9), ("u", -6), ("m", -3), ("", 0), ("k", 3), ("M", 6), ("G", 9), ("T", 12)];

    private static readonly string[] _units = ["V", "C", "1", "degC", "K/W", "V/s", "Hz"];

    private static readonly string[] _prefixed = ["V", "A", "s", "Ohm", "H", "F", "J", "Hz", "C"];

    [Theory]
    [InlineData("400 V", 400, "V")]
    [InlineData("3.3 uH", 3.3e-6, "H")]
    [InlineData("3.3 µH", 3.3e-6, "H")]
    [InlineData("3.3 μH", 3.3e-6, "H")]
    [InlineData("250 ns", 2.5e-7, "s")]
    [InlineData("175 degC", 175, "degC")]
    [InlineData("-40 °C", -40, "degC")]
    [InlineData("0.45 K/W", 0.45, "K/W")]
    [InlineData("10 mOhm", 0.01, "Ohm")]
    [InlineData("4.7 Ω", 4.7, "Ohm")]
    [InlineData("2 %", 0.02, "1")]
    [InlineData("0.045", 0.045, "1")]
    [InlineData("42 MHz", 42e6, "Hz")]
    [InlineData("30 V/ns", 30e9, "V/s")]
    [InlineData("2.5 kA/us", 2.5e9, "A/s")]
    [InlineData("400V", 400, "V")]
    [InlineData("1.5e3 V", 1500, "V")]
    [InlineData("+.5 A", 0.5, "A")]
    public void A_text_is_read_exactly(string text, double value, string unit)
    {
        Assert.True(SiText.TryParse(text, out double read, out string si));
        Assert.Equal(BitConverter.DoubleToInt64Bits(value), BitConverter.DoubleToInt64Bits(read));
        Assert.Equal(unit, si);
    }

    [Theory]
    [InlineData("")]
    [InlineData("V")]
    [InlineData("2,5 V")]
    [InlineData("1 000 V")]
    [InlineData("400 volts")]
    [InlineData("400 v")]
    [InlineData("3 xH")]
    [InlineData("5 m%")]
    [InlineData("5 mdegC")]
    [InlineData("NaN V")]
    [InlineData("Infinity V")]
    [InlineData("1e999 V")]
    [InlineData("1e99999999999 V")]
    [InlineData("0x10 V")]
    [InlineData("1e V")]
    [InlineData("5 V/V")]
    [InlineData("5 Ohm/s")]
    [InlineData("400 V V")]
    [InlineData("٤٠٠ V")]
    public void What_is_no_value_is_refused(string text) =>
        Assert.False(SiText.TryParse(text, out _, out _));

    [Fact]
    public void A_prefix_moves_the_exponent_of_the_decimal_text_and_never_multiplies() =>
        Gen.Select(Gen.Int[0, 999_999], Gen.Int[0, 6], Gen.Int[0, _prefixes.Length - 1])
            .Sample((digits, places, prefix) =>
            {
                string mantissa = (digits / (decimal)Math.Pow(10, places)).ToString(CultureInfo.InvariantCulture);
                double wanted = double.Parse(
                    $"{mantissa}E{_prefixes[prefix].Power}", NumberStyles.Float, CultureInfo.InvariantCulture);
                Assert.True(SiText.TryParse($"{mantissa} {_prefixes[prefix].Prefix}H", out double read, out _));
                return BitConverter.DoubleToInt64Bits(wanted) == BitConverter.DoubleToInt64Bits(read);
            });

    [Theory]
    [InlineData(41.9e6, "Hz", "41.9 MHz")]
    [InlineData(612e-6, "J", "612 uJ")]
    [InlineData(600, "V", "600 V")]
    [InlineData(0, "V", "0 V")]
    [InlineData(-4, "V", "-4 V")]
    [InlineData(0.9999e-6, "s", "999.9 ns")]
    [InlineData(999.96e-9, "s", "1 us")]
    [InlineData(123456, "V", "123.5 kV")]
    [InlineData(0.0538, "1", "0.0538")]
    [InlineData(175, "degC", "175 degC")]
    [InlineData(0.004, "K/W", "0.004 K/W")]
    [InlineData(52.3e9, "V/s", "52.3 GV/s")]
    [InlineData(5e-19, "C", "5E-19 C")]
    [InlineData(6e15, "V", "6E15 V")]
    public void A_value_is_written_with_the_prefix_that_people_read(double value, string unit, string text) =>
        Assert.Equal(text, SiText.Format(value, unit));

    [Theory]
    [InlineData(1, "600 V")]
    [InlineData(2, "610 V")]
    [InlineData(3, "612 V")]
    [InlineData(5, "612.35 V")]
    public void The_digits_asked_for_are_significant_ones(int digits, string text) =>
        Assert.Equal(text, SiText.Format(612.346, "V", digits));

    [Theory]
    [InlineData(0.02, "2 %")]
    [InlineData(0.9999, "100 %")]
    [InlineData(0.00125, "0.125 %")]
    public void A_ratio_is_written_in_percent(double ratio, string text) =>
        Assert.Equal(text, SiText.Percent(ratio));

    [Fact]
    public void Seventeen_digits_come_back_to_the_same_bits() =>
        Gen.Select(Value, Gen.Int[0, _prefixed.Length - 1]).Sample((value, unit) =>
            SiText.TryParse(SiText.Format(value, _prefixed[unit], 17), out double read, out string si)
            && si == _prefixed[unit]
            && BitConverter.DoubleToInt64Bits(read) == BitConverter.DoubleToInt64Bits(value));

    [Fact]
    public void A_written_value_comes_back_within_its_rounding() =>
        Gen.Select(Value, Gen.Int[1, 17], Gen.Int[0, _units.Length - 1])
            .Sample((value, digits, unit) =>
                SiText.TryParse(SiText.Format(value, _units[unit], digits), out double read, out string si)
                && si == _units[unit]
                && Math.Abs(read - value) <= 0.51 * Math.Pow(10, 1 - digits) * Math.Abs(value));

    private static Gen<double> Value =>
        Gen.Select(Gen.Double[1, 10], Gen.Int[-18, 15], Gen.Bool)
            .Select((mantissa, power, isNegative) => (isNegative ? -1 : 1) * mantissa * Math.Pow(10, power));
}
