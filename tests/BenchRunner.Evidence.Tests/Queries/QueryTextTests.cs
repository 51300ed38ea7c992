using System.Text.Json;
using BenchRunner.Evidence.Queries;

namespace BenchRunner.Evidence.Tests.Queries;

public sealed class QueryTextTests
{
    private static readonly QueryTable Sample = new(
        ["device", "value", "n", "reason"],
        [["W1200-0001", 6.5e-4, 12L, null], ["W2", 1234567.891, -3L, "late, \"very\""], ["W3", null, null, "x"]]);

    [Fact]
    public void A_table_is_aligned() => Assert.Equal(
        """
        device            value   n  reason
        ----------  -----------  --  ------------
        W1200-0001      0.00065  12  -
        W2          1.23457E+06  -3  late, "very"
        W3                    -   -  x

        """,
        QueryText.Table(Sample));

    [Fact]
    public void An_empty_answer_still_has_its_columns()
    {
        QueryTable empty = new(["lot", "devices"], []);
        Assert.Equal("lot  devices\n---  -------\n", QueryText.Table(empty));
        Assert.Equal("lot,devices\n", QueryText.Csv(empty));
        Assert.Equal("{\"format\":1,\"columns\":[\"lot\",\"devices\"],\"rows\":[]}\n", QueryText.Json(empty));
    }

    [Fact]
    public void Csv_is_quoted_after_RFC_4180_and_exact() => Assert.Equal(
        """"
        device,value,n,reason
        W1200-0001,0.00065,12,
        W2,1234567.891,-3,"late, ""very"""
        W3,,,x

        """",
        QueryText.Csv(Sample));

    [Theory]
    [InlineData("=HYPERLINK(\"x\")", "\"'=HYPERLINK(\"\"x\"\")\"")]
    [InlineData("+1", "\"'+1\"")]
    [InlineData("-1", "\"'-1\"")]
    [InlineData("@SUM(A1)", "\"'@SUM(A1)\"")]
    [InlineData("\t=1", "\"'\t=1\"")]
    [InlineData("a=1", "a=1")]
    [InlineData("two\nlines", "\"two\nlines\"")]
    public void A_text_that_looks_like_a_formula_is_none_in_a_spreadsheet(string text, string expected) =>
        Assert.Equal($"c\n{expected}\n", QueryText.Csv(new QueryTable(["c"], [[text]])));

    [Fact]
    public void Control_and_direction_characters_are_escaped_in_a_table()
    {
        string table = QueryText.Table(new QueryTable(["c"], [["a\u001b[31m\nb\u202ec"]]));
        Assert.Equal("c\n-------------------------\na\\u001b[31m\\u000ab\\u202ec", table.TrimEnd());
    }

    [Fact]
    public void Json_has_numbers_as_numbers_and_null_for_what_is_none()
    {
        QueryTable table = new(
            ["a"], [[1L], [0.1], [double.PositiveInfinity], [null], ["Ω\"\n"], [new byte[] { 0x0f, 0xa0 }]]);
        using JsonDocument json = JsonDocument.Parse(QueryText.Json(table));
        Assert.Equal(1, json.RootElement.GetProperty("format").GetInt32());
        JsonElement[] values = [.. json.RootElement.GetProperty("rows").EnumerateArray().Select(row => row[0])];
        Assert.Equal(1, values[0].GetInt64());
        Assert.Equal(0.1, values[1].GetDouble());
        Assert.Equal([JsonValueKind.Null, JsonValueKind.Null], values[2..4].Select(value => value.ValueKind));
        Assert.Equal(["Ω\"\n", "0fa0"], values[4..].Select(value => value.GetString()));
    }
}
