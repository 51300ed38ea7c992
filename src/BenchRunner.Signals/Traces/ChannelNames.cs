using System.Diagnostics;

namespace BenchRunner.Signals.Traces;

/// <summary>The names that files, reports and the evidence use for the channels.</summary>
public static class ChannelNames
{
    /// <summary>All channels, in the order in which they are listed everywhere.</summary>
    public static IReadOnlyList<Channel> All { get; } = Enum.GetValues<Channel>();

    /// <summary>The name of a channel in files, e.g. <c>vds_low</c>.</summary>
    public static string Name(this Channel channel) => channel switch
    {
        Channel.VgsLow => "vgs_low",
        Channel.VdsLow => "vds_low",
        Channel.IdLow => "id_low",
        Channel.VgsHigh => "vgs_high",
        Channel.VdsHigh => "vds_high",
        Channel.IdHigh => "id_high",
        Channel.Vbus => "vbus",
        Channel.ILoad => "i_load",
        _ => throw new UnreachableException(),
    };

    /// <summary>The unit of a channel: <c>V</c> or <c>A</c>.</summary>
    public static string Unit(this Channel channel) =>
        channel is Channel.IdLow or Channel.IdHigh or Channel.ILoad ? "A" : "V";

    /// <summary>The channel of a name, or null where no channel has it. Names are case-sensitive.</summary>
    public static Channel? Parse(string name)
    {
        foreach (Channel channel in All)
        {
            if (channel.Name() == name)
            {
                return channel;
            }
        }

        return null;
    }
}
