using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Tests.Files;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Acceptance.Tests.Sequences;

public sealed class SequenceFileTests
{
    [Fact]
    public void Every_value_of_the_shipped_file_arrives_in_SI()
    {
        Sequence sequence = Read(Examples.Sequence);
        Assert.Equal("wd-1200s-25 incoming", sequence.Name);
        Assert.Equal((DeviceKind.Mosfet, DevicePosition.Both), (sequence.Kind, sequence.Position));
        Assert.Equal(new DeviceRatings(1200, 160, -8, 22, 175), sequence.Ratings);
        Assert.Equal(
            [new ThermalPoint(10e-6, 0.004), new(1e-3, 0.03), new(double.PositiveInfinity, 0.45)],
            sequence.ThermalImpedance);
        Assert.Equal(new ExpectedBehaviour(10e-9, 42e6, 1.1, 3), sequence.Expected);
        Assert.Equal(2e-3, sequence.Leakage);
        Assert.Equal((5, 20), (sequence.ValidCaptures, sequence.CapturesAtMost));
        Assert.Equal(new DecisionRule(true, 0.95, 1), sequence.Decision);

        OperatingPoint rated = sequence.OperatingPoints[1];
        Assert.Equal(("rated", 600.0, 40.0), (rated.Name, rated.BusVoltage, rated.LoadCurrent));
        Assert.Null(rated.Temperature);
        Assert.Equal((18.0, -4.0, 4.7, 2.2), (rated.GateOn, rated.GateOff, rated.ResistanceOn, rated.ResistanceOff));
        Assert.Equal((6e-6, 3e-6, 0.25), (rated.Gap, rated.SecondPulse, rated.RepeatEvery));

        Limit ring = Assert.Single(sequence.Limits, limit => limit.Quantity == "ring_frequency");
        Assert.Equal((39.3e6, 44.4e6), (ring.Lower, ring.Upper));
        Limit damping = Assert.Single(sequence.Limits, limit => limit.Quantity == "ring_damping");
        Assert.Equal((0.045, null), (damping.Lower, damping.Upper));
    }

    [Fact]
    public void What_the_file_leaves_out_has_the_stated_default()
    {
        Sequence sequence = Read(Examples.Sequence
            .With("captures: { valid: 5, at-most: 20 }\n", "")
            .With("validity: { current-within: 2 %, bus-droop: 3 %, ramp-straightness: 2 %, noise-below: 1 % }\n", "")
            .With("    temperature: ambient\n", "")
            .With("leakage: 2 mA\n", "")
            .With("decision: { rule: guarded, coverage: 95 % }\n", ""));
        Assert.Equal((5, 20, 2), (sequence.ValidCaptures, sequence.CapturesAtMost, sequence.Attempts));
        Assert.Equal(new ValidityBounds(), sequence.Validity);
        Assert.Equal(new DecisionRule(), sequence.Decision);
        Assert.Null(sequence.Leakage);
        Assert.Equal(120, sequence.Soak);
        Assert.False(sequence.UntilDecided);
        Assert.False(sequence.AsWritten);
    }

    [Fact]
    public void The_keys_that_the_shipped_file_does_not_use_arrive_too()
    {
        Sequence sequence = Read(Examples.Sequence
            .With("position: both", "position: high\ncompanion: { part: WD-1200D-25 }\norder: as-written\nsoak: 5e2 s")
            .With("valid: 5, at-most: 20 }", "valid: 3, at-most: 9 }\nuntil: decided\nattempts: 4")
            .With("noise-below: 1 % }", "gate-levels: 0.3 V, temperature-within: 2 K, settled: default }")
            .With("temperature: ambient", "temperature: 125 degC")
            .With("at-most: 215 uJ }", "at-most: 215 uJ, definition: e/10-2, else-skip-higher: true }")
            .With("rule: guarded, coverage: 95 %", "rule: simple, coverage: 0.99, guard-factor: 0.83"));
        Assert.Equal(("WD-1200D-25", DevicePosition.High), (sequence.CompanionPart, sequence.Position));
        Assert.True(sequence.AsWritten);
        Assert.True(sequence.UntilDecided);
        Assert.Equal((3, 9), (sequence.ValidCaptures, sequence.CapturesAtMost));
        Assert.Equal((500.0, 4), (sequence.Soak, sequence.Attempts));
        Assert.Equal((0.3, 2.0), (sequence.Validity.GateLevels, sequence.Validity.TemperatureWithin));
        Assert.Equal(125, sequence.OperatingPoints[0].Temperature);
        Assert.Equal(("e/10-2", true), (sequence.Limits[0].Definition, sequence.Limits[0].ElseSkipHigher));
        Assert.Equal(new DecisionRule(false, 0.99, 0.83), sequence.Decision);
    }

    [Theory]
    [InlineData("integration-time: 80 ns")]
    [InlineData("definitions: { qrr: qrr/window-80ns }")]
    [InlineData("definitions: { qrr: qrr/window-80ns@id_low-iL }\nintegration-time: 80 ns")]
    public void An_integration_time_is_named_by_its_key_or_by_a_definition(string lines) =>
        Assert.Equal(80e-9, Read(Examples.Sequence.With("decision:", lines + "\ndecision:")).IntegrationTime);

    [Fact]
    public void Places_lead_back_to_the_file()
    {
        Sequence sequence = Read(Examples.Sequence);
        string[] lines = Examples.Sequence.Split('\n');
        AssertStands("160 A", sequence.Keys["ratings.peak-current"]);
        AssertStands("400 V", sequence.OperatingPoints[0].Keys["bus-voltage"]);
        AssertStands("2.2 Ohm", sequence.OperatingPoints[1].Keys["gate.resistance-off"]);
        AssertStands("{ quantity: eon", sequence.Limits[0].Where);

        void AssertStands(string text, Place place) =>
            Assert.StartsWith(text, lines[place.Line - 1][(place.Column - 1)..], StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("W1200-0001", true)]
    [InlineData("W1200-00012", false)]
    [InlineData("w1200-0001", false)]
    [InlineData("XW1200-0001", false)]
    [InlineData("W1200-0001\n", false)]
    [InlineData("", false)]
    public void A_serial_must_match_the_form_as_a_whole(string serial, bool isRight) =>
        Assert.Equal(isRight, SerialForm.Check(serial, Read(Examples.Sequence), "--device") is null);

    [Theory]
    [InlineData("A.b_c-9", true)]
    [InlineData("../etc/passwd", false)]
    [InlineData("a b", false)]
    [InlineData("'; drop table", false)]
    [InlineData("\u202Eabc", false)]
    public void Without_a_form_a_serial_still_holds_only_what_is_safe_in_paths_and_tables(string serial, bool isRight)
    {
        Sequence sequence = Read(Examples.Sequence.With("serial: { form: 'W1200-[0-9]{4}' }\n", ""));
        Assert.Equal(isRight, SerialForm.Check(serial, sequence, "--device") is null);
        Assert.NotNull(SerialForm.Check(new string('a', 65), sequence, "--device"));
    }

    [Fact]
    public void An_expression_that_would_hang_a_backtracking_matcher_answers()
    {
        Sequence sequence = Read(Examples.Sequence.With("W1200-[0-9]{4}", "(a+)+b"));
        Assert.NotNull(SerialForm.Check(new string('a', 64), sequence, "--device"));
    }

    private static Sequence Read(string text)
    {
        Read<Sequence> read = SequenceFile.Read(Readers.Source("sequence.yaml", text));
        Assert.Empty(read.Problems);
        return read.Value!;
    }
}
