using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Runner.Cases;
using CsCheck;

namespace BenchRunner.Runner.Tests.Cases;

public sealed class CaseTests
{
    private const string Device = "W1200-0001";

    private static readonly Limit Limit = new("qrr", null, "rated", null, 785e-9, false, new Place("s.yaml", 1, 1));

    private static readonly MeasuredValue Value = new(
        "rated", "qrr", "qrr/chord-90-25", 700e-9, "C", 5e-9, 10e-9, 2, 30, 5, null, 785e-9, Conformity.Conforms, null);

    [Theory]
    [InlineData(Conformity.Conforms, CaseEnding.Conforms)]
    [InlineData(Conformity.Fails, CaseEnding.Fails)]
    [InlineData(Conformity.Undecided, CaseEnding.Undecided)]
    public void A_case_ends_as_its_value_was_decided(Conformity conformity, CaseEnding ending)
    {
        CaseResult result = Result(Value with { Conformity = conformity, Reason = "as found" });

        Assert.Equal(ending, result.Ending);
        Assert.Equal(700e-9, result.Value!.Value);
        Assert.Equal("as found", result.Reason);
        Assert.Equal((Device, Limit), (result.Device, result.Limit));
    }

    [Fact]
    public void A_value_out_of_no_capture_was_not_measured() =>
        Assert.Equal(
            CaseEnding.NotMeasured,
            Result(Value with { Captures = 0, Value = null, Conformity = Conformity.Undecided }).Ending);

    [Fact]
    public void A_limit_that_nothing_was_measured_for_says_why_the_device_ended()
    {
        var stopped = new DeviceDecision(Outcome.Stopped, "the interlock loop is open", []);

        CaseResult result = new Case(Device, Limit).Result(stopped);

        Assert.Equal(CaseEnding.NotMeasured, result.Ending);
        Assert.Null(result.Value);
        Assert.Equal("the interlock loop is open", result.Reason);
    }

    public static TheoryData<string> Others => ["point", "quantity", "upper", "lower", "no limit"];

    [Theory]
    [MemberData(nameof(Others))]
    public void A_limit_never_takes_anothers_value(string other)
    {
        MeasuredValue anothers = other switch
        {
            "point" => Value with { OperatingPoint = "half" },
            "quantity" => Value with { Quantity = "eon" },
            "upper" => Value with { Upper = 786e-9 },
            "lower" => Value with { Lower = 0 },
            _ => Value with { Upper = null, Conformity = null },
        };

        Assert.Equal(CaseEnding.NotMeasured, Result(anothers).Ending);
    }

    [Fact]
    public void Two_limits_alike_but_for_their_definition_take_each_its_own()
    {
        MeasuredValue window = Value with { Definition = "qrr/window-100ns@id_low-iL", Conformity = Conformity.Fails };
        var decision = new DeviceDecision(Outcome.Rejected, "", [Value, window]);

        Assert.Equal(
            CaseEnding.Conforms,
            new Case(Device, Limit with { Definition = "qrr/chord-90-25" }).Result(decision).Ending);
        Assert.Equal(
            CaseEnding.Fails, new Case(Device, Limit with { Definition = "qrr/window-100ns" }).Result(decision).Ending);
    }

    [Fact]
    public void In_any_order_of_the_values_each_limit_gets_its_own() =>
        Gen.Shuffle(Enumerable.Range(0, 12).ToArray()).Sample(order =>
        {
            // Limit i stands on quantity i/4 at point i%4 and is met where i is even.
            MeasuredValue[] values =
            [
                .. order.Select(i => Value with
                {
                    OperatingPoint = $"p{i % 4}", Quantity = $"q{i / 4}", Value = i,
                    Conformity = i % 2 == 0 ? Conformity.Conforms : Conformity.Fails,
                }),
            ];
            var decision = new DeviceDecision(Outcome.Rejected, null, values);
            return Enumerable.Range(0, 12).All(i =>
            {
                Limit limit = Limit with { At = $"p{i % 4}", Quantity = $"q{i / 4}" };
                CaseResult result = new Case(Device, limit).Result(decision);
                return result.Value?.Value == i
                    && result.Ending == (i % 2 == 0 ? CaseEnding.Conforms : CaseEnding.Fails);
            });
        });

    private static CaseResult Result(MeasuredValue value) =>
        new Case(Device, Limit).Result(new DeviceDecision(Outcome.Undecided, null, [value]));
}
