using System.Globalization;
using System.Text.Json;
using FakeBench.Scpi;

namespace FakeBench.Tests.Scpi;

public sealed class ParameterTests
{
    private static readonly NumericRange Wide = new(-7e9, 9e9, 3);

    public static TheoryData<string, string, string, string> Parameters() => new(
        ScpiReference.Cases("headers.json", "parameters").Select(c =>
            (c.Text("id"), c.Text("input"), c.Text("unit"), c.GetProperty("expect").GetRawText())));

    [Theory]
    [MemberData(nameof(Parameters))]
    public void A_parameter_is_read_or_refused_as_the_standard_says(string id, string input, string unit, string expect)
    {
        double? taken = null;
        var scpi = new Interpreter(() => "", () => { });
        NumericRange range = unit.Length == 0 ? NumericRange.Mask(255) : Wide with { Unit = unit };
        if (unit.Length == 0)
        {
            scpi.Commands.WholeNumber("TEST", range, value => taken = value, () => 0);
        }
        else
        {
            scpi.Commands.Number("TEST", range, (_, value) => taken = value, _ => 0);
        }

        scpi.Obey("TEST " + input);
        JsonElement expected = JsonDocument.Parse(expect).RootElement;
        if (expected.TryGetProperty("scpi_error", out JsonElement error))
        {
            string number = error.GetInt32().ToString(CultureInfo.InvariantCulture);
            Assert.StartsWith(number + ",", scpi.Status.Errors.Next(), StringComparison.Ordinal);
            Assert.Null(taken);
            return;
        }

        double wanted = expected.TryGetProperty("keyword", out JsonElement keyword)
            ? keyword.GetString() switch { "MINimum" => Wide.Minimum, "MAXimum" => Wide.Maximum, _ => Wide.Default }
            : expected.GetProperty("value").GetDouble();
        Assert.Equal(0, scpi.Status.Errors.Count);
        Assert.True(taken is { } value && Math.Abs(value - wanted) <= 1e-15 * Math.Abs(wanted), $"{id}: {taken}");
    }

    // Numbers from tests/reference/scpi/errors.json; which applies to which mistake: IEEE 488.2, 7 and SCPI-1999
    // volume 2, 21.8 (from memory).
    [Theory]
    [InlineData("TEST 1,2", -108)]
    [InlineData("TEST", -109)]
    [InlineData("TEST 1,", -109)]
    [InlineData("TEST \"open", -151)]
    [InlineData("TEST #0abc", -161)]
    [InlineData("TEST #29", -161)]
    [InlineData("TEST #12a", -161)]
    [InlineData("TEST (1", -102)]
    [InlineData("TEST 1.2.3", -121)]
    [InlineData("TEST #B102", -121)]
    [InlineData("TEST +", -120)]
    [InlineData("TEST \u00e9", -101)]
    [InlineData("T\u00e9ST 1", -101)]
    [InlineData("TESTTESTTESTT 1", -112)]
    [InlineData("TEST ABCDEFGHIJKLM", -141)]
    [InlineData("TEST 1 V", -138)]
    [InlineData("TEST 256", -222)]
    [InlineData("TEST NAN", -224)]
    [InlineData("NONE 1", -113)]
    [InlineData("TEST2 1", -114)]
    public void A_mistake_gets_its_own_number(string message, int number)
    {
        var scpi = new Interpreter(() => "", () => { });
        scpi.Commands.WholeNumber("TEST", NumericRange.Mask(255), _ => { }, () => 0);
        scpi.Obey(message);
        Assert.StartsWith(
            number.ToString(CultureInfo.InvariantCulture) + ",", scpi.Status.Errors.Next(), StringComparison.Ordinal);
        Assert.Equal(0, scpi.Status.Errors.Count);
    }

    [Fact]
    public void A_block_may_hold_any_byte_and_a_string_its_own_quote()
    {
        var units = new ProgramMessage("A #14\n;,\"; B 'it''s; here',\"say \"\"so\"\"\"");
        ProgramUnit block = units.Next()!;
        Assert.Equal((DataKind.Block, "\n;,\""), (block.Data[0].Kind, block.Data[0].Text));
        ProgramUnit strings = units.Next()!;
        Assert.Equal(["it's; here", "say \"so\""], strings.Data.Select(d => d.Text));
        Assert.Null(units.Next());
    }

    [Fact]
    public void A_query_of_a_setting_tells_its_bounds()
    {
        var scpi = new Interpreter(() => "", () => { });
        scpi.Commands.Number("LEVel", new NumericRange(1, 5, 2, "V"), (_, _) => { }, _ => 4);
        Assert.Equal(
            "4.0E+00;1.0E+00;5.0E+00;2.0E+00\n",
            System.Text.Encoding.ASCII.GetString(scpi.Obey("LEV?;LEV? MIN;LEV? MAXIMUM;LEV? DEF").Finish()));
    }

    [Theory]
    [InlineData(0, "0.0E+00")]
    [InlineData(600, "6.0E+02")]
    [InlineData(-2.5e-7, "-2.5E-07")]
    [InlineData(double.NaN, "9.91E+37")]
    [InlineData(double.NegativeInfinity, "-9.9E+37")]
    public void A_real_number_is_said_with_point_and_exponent(double value, string said) =>
        Assert.Equal(said, Numbers.Nr3(value)); // IEEE 488.2, 8.7.4 (NR3); SCPI-1999 volume 1, 7.2.1 (special values)
}
