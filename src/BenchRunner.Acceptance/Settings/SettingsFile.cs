using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Settings;

/// <summary>Reads the settings of <c>analyse</c>. Never throws for what a file holds.</summary>
public static class SettingsFile
{
    /// <summary>Reads a settings file.</summary>
    /// <param name="path">Its path.</param>
    public static Read<AnalysisSettings> Read(string path) => FormatReader.Open("settings", path, Read);

    /// <summary>Reads the bytes of a settings file.</summary>
    /// <param name="source">The file.</param>
    public static Read<AnalysisSettings> Read(SourceFile source) =>
        FormatReader.Read(source, SettingsKeys.Root, Check, Build);

    private static void Check(Fields file, List<Problem> problems)
    {
        ChannelKeys.Check(file.Block("channels"), problems);
        IntegrationTimes.Check(file, [], problems);
    }

    private static AnalysisSettings Build(Fields file)
    {
        var usual = new AnalysisSettings();
        Fields channels = file.Block("channels");
        return usual with
        {
            Kind = file.Text("kind") is { } kind ? Shapes.Kinds[kind] : usual.Kind,
            Position = file.Text("position") is { } position ? Shapes.Positions[position] : usual.Position,
            Corrections = channels.Keys.ToDictionary(
                name => ChannelNames.Parse(name)!.Value, name => Correction(channels.Block(name))),
            Shunt = Shapes.ShuntOf(file),
            ForwardVoltage = file.Block("diode").Number("forward-voltage"),
            HighSideThreshold = file.Block("high-side").Number("gate-threshold"),
            IntegrationTime = IntegrationTimes.Of(file, []),
            DeadTime = file.Number("dead-time") ?? usual.DeadTime,
            Definitions = Shapes.DefinitionsIn(file),
        };
    }

    private static ChannelCorrection Correction(Fields channel) =>
        new(
            channel.Number("gain") ?? 1,
            channel.Number("offset"),
            (channel.Number("delay") ?? 0) + (channel.Number("skew") ?? 0));
}
