using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Sequences;

/// <summary>Reads sequence files. Never throws for what a file holds: its mistakes are problems, all at once.</summary>
public static class SequenceFile
{
    /// <summary>Reads a sequence file.</summary>
    /// <param name="path">Its path.</param>
    public static Read<Sequence> Read(string path) => FormatReader.Open("sequence", path, Read);

    /// <summary>Reads the bytes of a sequence file.</summary>
    /// <param name="source">The file.</param>
    public static Read<Sequence> Read(SourceFile source) =>
        FormatReader.Read(source, SequenceKeys.Root, SequenceRules.Check, file => Build(file, source));

    private static Sequence Build(Fields file, SourceFile source)
    {
        Fields captures = file.Block("captures");
        return new Sequence
        {
            Name = file.Text("sequence")!,
            Revision = file.Whole("revision")!.Value,
            Part = file.Text("part")!,
            Kind = Shapes.Kinds[file.Text("kind")!],
            Position = Shapes.Positions[file.Text("position")!],
            SerialForm = file.Block("serial").Text("form"),
            CompanionPart = file.Block("companion").Text("part"),
            Ratings = Ratings(file.Block("ratings")),
            ThermalImpedance = file.Thermal("thermal-impedance"),
            Expected = Expected(file.Block("expected")),
            Leakage = file.Number("leakage"),
            OperatingPoints = [.. file.Blocks("operating-points").Select(Point)],
            AsWritten = file.Text("order") == "as-written",
            Soak = file.Number("soak") ?? Sequence.UsualSoak,
            ValidCaptures = captures.Whole("valid") ?? Sequence.UsualValidCaptures,
            CapturesAtMost = captures.Whole("at-most") ?? Sequence.UsualCapturesAtMost,
            UntilDecided = file.Text("until") == "decided",
            Validity = Validity(file.Block("validity")),
            Limits = [.. file.Blocks("limits").Select(Limit)],
            Decision = Decision(file.Block("decision")),
            Attempts = file.Whole("attempts") ?? Sequence.UsualAttempts,
            Definitions = Shapes.DefinitionsIn(file),
            IntegrationTime = IntegrationTimes.Of(file, file.Blocks("limits")),
            Keys = file.Places(),
            Source = source,
        };
    }

    private static DeviceRatings Ratings(Fields block)
    {
        (double low, double high) = block.Pair("gate")!.Value;
        return new DeviceRatings(
            block.Need("blocking-voltage"), block.Need("peak-current"), low, high, block.Need("junction-max"));
    }

    private static ExpectedBehaviour Expected(Fields block) => new(
        block.Need("fastest-edge"),
        block.Need("ring-frequency"),
        block.Need("on-voltage"),
        block.Need("forward-voltage"));

    private static OperatingPoint Point(Fields block)
    {
        Fields gate = block.Block("gate");
        Fields pulses = block.Block("pulses");
        return new OperatingPoint
        {
            Name = block.Text("name")!,
            BusVoltage = block.Need("bus-voltage"),
            LoadCurrent = block.Need("load-current"),
            Temperature = block.Number("temperature"),
            GateOn = gate.Need("on"),
            GateOff = gate.Need("off"),
            ResistanceOn = gate.Number("resistance-on"),
            ResistanceOff = gate.Number("resistance-off"),
            Gap = pulses.Need("gap"),
            SecondPulse = pulses.Need("second"),
            RepeatEvery = pulses.Need("repeat-every"),
            ElseSkipHigher = block.Flag("else-skip-higher") ?? false,
            Where = block.Where,
            Keys = block.Places(),
        };
    }

    private static ValidityBounds Validity(Fields block)
    {
        var usual = new ValidityBounds();
        return new ValidityBounds
        {
            BusWithin = block.Number("bus-within") ?? usual.BusWithin,
            BusDroop = block.Number("bus-droop") ?? usual.BusDroop,
            CurrentWithin = block.Number("current-within") ?? usual.CurrentWithin,
            RampStraightness = block.Number("ramp-straightness") ?? usual.RampStraightness,
            NoiseBelow = block.Number("noise-below") ?? usual.NoiseBelow,
            TemperatureWithin = block.Number("temperature-within") ?? usual.TemperatureWithin,
            GateLevels = block.Number("gate-levels") ?? usual.GateLevels,
        };
    }

    private static Limit Limit(Fields block)
    {
        (double Low, double High)? between = block.Pair("between");
        return new Limit(
            block.Text("quantity")!,
            block.Text("definition"),
            block.Text("at")!,
            between?.Low ?? block.Number("at-least"),
            between?.High ?? block.Number("at-most"),
            block.Flag("else-skip-higher") ?? false,
            block.Where);
    }

    private static DecisionRule Decision(Fields block)
    {
        var usual = new DecisionRule();
        return new DecisionRule(
            block.Text("rule") != "simple",
            block.Number("coverage") ?? usual.Coverage,
            block.Number("guard-factor") ?? usual.GuardFactor);
    }
}
