using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;
using static BenchRunner.Acceptance.Tests.Plans.Refusals;

namespace BenchRunner.Acceptance.Tests.Plans;

/// <summary>Each refusal of a limit fires on files whose only flaw it is.</summary>
public sealed class LimitRefusalTests
{
    [Theory]
    [InlineData("bus_voltage", "bus-within")]
    [InlineData("bus_droop", "bus-droop")]
    [InlineData("i_off", "current-within")]
    [InlineData("ramp_straightness", "ramp-straightness")]
    [InlineData("ramp_slope", "bus-agrees")]
    [InlineData("vgs_on", "gate-levels")]
    [InlineData("vgs_off", "gate-levels")]
    public void A_limit_on_what_a_criterion_uses_is_refused(string quantity, string criterion) =>
        Refused(Limited(quantity), Shipped.Bench, $"on {quantity}", criterion, "selected");

    [Theory]
    [InlineData("eon", DeviceKind.Mosfet, DevicePosition.Low, true)]
    [InlineData("qrr", DeviceKind.Mosfet, DevicePosition.Low, false)]
    [InlineData("vds_high_peak_1", DeviceKind.Mosfet, DevicePosition.Low, false)]
    [InlineData("ring_damping", DeviceKind.Mosfet, DevicePosition.Low, true)]
    [InlineData("id_peak_on", DeviceKind.Mosfet, DevicePosition.Low, true)]
    [InlineData("qrr", DeviceKind.Diode, DevicePosition.High, true)]
    [InlineData("eoff", DeviceKind.Diode, DevicePosition.High, false)]
    [InlineData("qrr", DeviceKind.Mosfet, DevicePosition.Both, true)]
    public void A_limit_that_belongs_to_the_companion_is_refused(
        string quantity, DeviceKind kind, DevicePosition position, bool allowed)
    {
        Sequence sequence = Limited(quantity) with { Kind = kind, Position = position };
        if (allowed)
        {
            Assert.Empty(Planner.Plan(sequence, Shipped.Bench).Refusals.Select(problem => problem.ToString()));
        }
        else
        {
            Refused(sequence, Shipped.Bench, $"on {quantity}", "companion");
        }
    }

    // Whose a quantity is: times, energies and on state are the transistor's (IEC 60747-8 and -9), recovery is the
    // diode's (IEC 60747-2); what the loop rings with is neither's. The division is common practice.
    private static readonly string[] _ofSwitch =
    [
        "eon", "eoff", "td_on", "td_off", "tr", "tf", "dvdt_on", "dvdt_off", "didt_on", "didt_off", "vds_on",
        "vds_peak_off", "vds_overshoot_off",
    ];

    private static readonly string[] _ofDiode =
    [
        "irm", "trr", "qrr", "ta", "tb", "softness", "dirr_dt", "dif_dt", "err", "vds_high_peak_1", "vds_high_peak_2",
        "vds_high_peak_3",
    ];

    private static readonly string[] _ofCircuit =
    [
        "id_peak_on", "loop_inductance", "ring_frequency", "ring_damping", "ring_amplitude", "ring_q",
        "ring_frequency_id", "ring_damping_id", "ring_frequency_off", "ring_damping_off", "bus_voltage", "bus_droop",
    ];

    [Theory]
    [InlineData(DeviceKind.Mosfet, DevicePosition.Low)]
    [InlineData(DeviceKind.Igbt, DevicePosition.High)]
    [InlineData(DeviceKind.Diode, DevicePosition.High)]
    [InlineData(DeviceKind.Diode, DevicePosition.Low)]
    [InlineData(DeviceKind.Mosfet, DevicePosition.Both)]
    public void Every_quantity_of_the_companion_is_refused_and_no_other(DeviceKind kind, DevicePosition position)
    {
        Sequence sequence = Shipped.Rated with { Kind = kind, Position = position };
        string[] companions = position == DevicePosition.Both ? []
            : kind == DeviceKind.Diode ? _ofSwitch : _ofDiode;
        foreach (string name in _ofSwitch.Concat(_ofDiode).Concat(_ofCircuit))
        {
            Sequence limited = sequence with { Limits = [Shipped.Rated.Limits[0] with { Quantity = name }] };
            bool refused = Planner.Plan(limited, Shipped.Bench).Refusals
                .Any(problem => problem.ToString().Contains("companion", StringComparison.Ordinal));
            Assert.True(companions.Contains(name) == refused, name);
        }
    }

    [Fact]
    public void A_limit_without_its_channel_is_refused()
    {
        Refused(
            Limited("vds_high_peak_1"),
            Without(Channel.VdsHigh),
            "on vds_high_peak_1", "needs vds_high");
        Assert.Empty(Planner.Plan(Limited("qrr"), Shipped.Bench).Refusals);
    }

    [Fact]
    public void An_unknown_quantity_or_definition_is_refused()
    {
        Refused(Limited("qrx"), Shipped.Bench, "on qrx", "catalogue");
        Sequence other = Shipped.Rated with
        {
            Limits = [Shipped.Rated.Limits[0] with { Quantity = "qrr", Definition = "qrr/guess" }],
        };
        Refused(other, Shipped.Bench, "qrr/guess", "qrr/chord-90-25");
    }

    [Fact]
    public void Two_limits_on_one_value_are_refused_however_they_are_written()
    {
        // The first takes by default the definition that the second names.
        Limit plain = Shipped.Rated.Limits[0] with { Quantity = "qrr", Definition = null, Upper = 785e-9 };
        Limit named = plain with { Definition = "qrr/chord-90-25", Upper = 800e-9 };
        Refused(Shipped.Rated with { Limits = [plain, named] }, Shipped.Bench, "second limit on qrr", "qrr/chord-90-25");
    }

    [Fact]
    public void Guard_bands_that_leave_no_room_are_refused()
    {
        // u = √((0.5 % · 700 V)² + (0.2 V)²) = 3.5 V, U = 6.9 V, two bands 13.7 V.
        Sequence narrow = Limited("vds_peak_off", 695, 705);
        Refused(narrow, Shipped.Bench, "10 V apart", "13.7 V", "no device can be accepted");
        Assert.Empty(Planner.Plan(narrow with { Decision = new DecisionRule(Guarded: false) }, Shipped.Bench).Refusals);
        Assert.Empty(Planner.Plan(Limited("vds_peak_off", 650, 750), Shipped.Bench).Refusals);
    }
}
