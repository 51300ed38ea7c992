using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Benches;

/// <summary>Reads bench files. Never throws for what a file holds: every mistake is a problem, all at once.</summary>
public static class BenchFile
{
    /// <summary>Reads a bench file.</summary>
    /// <param name="path">Its path.</param>
    public static Read<Bench> Read(string path) => FormatReader.Open("bench", path, Read);

    /// <summary>Reads the bytes of a bench file.</summary>
    /// <param name="source">The file.</param>
    public static Read<Bench> Read(SourceFile source) =>
        FormatReader.Read(source, BenchKeys.Root, BenchRules.Check, file => Build(file, source));

    private static Bench Build(Fields file, SourceFile source)
    {
        Fields roles = file.Block("roles");
        Fields load = file.Block("load");
        Fields bus = file.Block("bus");
        Fields scope = file.Block("scope");
        Fields resistors = file.Block("gate-resistors");
        Fields envelope = file.Block("envelope");
        return new Bench
        {
            Name = file.Text("bench")!,
            Fake = file.IsWritten("fake") ? Fake(file.Block("fake")) : null,
            Roles = roles.Keys.ToDictionary(role => role, role => Role(roles.Block(role))),
            ExchangeByHand = file.Text("exchange") == "by-hand",
            LoadInductance = load.Need("inductance"),
            LoadResistance = load.Need("resistance"),
            LoadToPositive = load.Text("to") != "negative",
            BusCapacitance = bus.Need("capacitance"),
            Bleeder = bus.Need("bleeder"),
            EmptySocketCurrent = bus.Number("empty-socket") ?? 0,
            ChargingCurrent = file.Block("supply").Need("charging-current"),
            SupplyCurrentAccuracy = file.Block("supply").Number("current-accuracy"),
            LoopInductance = file.Block("loop").Need("inductance"),
            GateResistorOn = resistors.Need("on"),
            GateResistorOff = resistors.Need("off"),
            HighSideThreshold = file.Block("high-side").Number("gate-threshold"),
            Shunt = Shapes.ShuntOf(file),
            Channels = [.. ChannelNames.All.Where(channel => file.Block("channels").IsWritten(channel.Name()))
                .Select(channel => Channel(channel, file.Block("channels").Block(channel.Name())))],
            ScopeBits = scope.Whole("bits") ?? Bench.UsualScopeBits,
            ScopeFastestInterval = scope.Number("fastest-interval") ?? Bench.UsualScopeInterval,
            ScopeMemory = scope.Whole("samples-at-most") ?? Bench.UsualScopeMemory,
            Envelope = new Envelope(
                envelope.Need("voltage"), envelope.Need("current"), envelope.Need("energy"), envelope.Need("pulse"),
                envelope.Number("temperature")),
            Safety = Safety(file.Block("safety")),
            Ambient = file.Need("ambient"),
            Cautions = [.. file.Items("cautions").Select(item => (string)item.Content)],
            Keys = file.Places(),
            Source = source,
        };
    }

    private static FakeSettings Fake(Fields block) => new(
        block.Whole("seed")!.Value,
        block.Number("pace") ?? 1,
        [.. block.Items("faults").Select(item => (string)item.Content)]);

    private static SafetySettings Safety(Fields block) => new(
        block.Number("bus-down") ?? SafetySettings.Usual.BusDown,
        block.Number("energy-down") ?? SafetySettings.Usual.EnergyDown,
        block.Number("discharge-within") ?? SafetySettings.Usual.DischargeWithin,
        block.Number("reply-within") ?? SafetySettings.Usual.ReplyWithin,
        block.Number("guardian-silence") ?? SafetySettings.Usual.GuardianSilence);

    private static InstrumentSetup Role(Fields block) => new(
        block.Text("link")!, block.Text("dialect")!, block.Whole("connections") ?? 1, block.Text("at"),
        block.Text("identity"), block.Where);

    private static ChannelSetup Channel(Channel channel, Fields block)
    {
        Fields uncertainty = block.Block("uncertainty");
        return new ChannelSetup(
            channel,
            block.Whole("scope")!.Value,
            block.Text("probe")!,
            block.Number("rating"),
            block.Need("gain"),
            block.Number("offset"),
            block.Need("skew"),
            uncertainty.Need("gain"),
            uncertainty.Need("offset"),
            uncertainty.Need("skew"),
            block.Where)
        {
            CommonMode = block.Number("common-mode"),
            Bandwidth = block.Number("bandwidth"),
            Delay = block.Number("delay") ?? 0,
            Attenuation = block.Number("attenuation"),
        };
    }
}
