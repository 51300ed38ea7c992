using FakeBench.Fixtures;
using FakeBench.Scpi;

namespace FakeBench.Instruments;

/// <summary>The interlock controller: reads the safety chain, works the bleeder relay, holds the watchdog.</summary>
public sealed class Interlock : Instrument
{
    private static readonly NumericRange Watchdog = new(0, 60, 0, "S");

    /// <summary>Makes an interlock controller.</summary>
    public Interlock(Bench bench)
        : base(bench, "interlock")
    {
        Scpi.Commands.Ask("[SENSe:]DATA?", _ => Poll());
        Scpi.Commands.Switch("OUTPut[:STATe]", Bleed, () => Bench.Chain.Bleeder);
        Scpi.Commands.Number(
            "SYSTem:WATChdog[:TIME]",
            Watchdog,
            (_, time) => Bench.Chain.SetWatchdog(time, Bench.Now),
            _ => Bench.Chain.WatchdogTime);
    }

    /// <inheritdoc/>
    protected override void Reset()
    {
        Bench.Chain.SetWatchdog(0, Bench.Now);
        Bench.Chain.Bleeder = true;
    }

    private string Poll()
    {
        SafetyChain chain = Bench.Chain;
        chain.Feed(Bench.Now);
        bool[] said = [chain.LoopClosed, chain.EmergencyStop, chain.Bleeder, chain.WatchdogTripped];
        return string.Join(',', said.Select(Numbers.Boolean));
    }

    private void Bleed(bool on)
    {
        if (!on && !Bench.Chain.Closed)
        {
            throw new ScpiException(-221, "the safety chain is open: the bleeder stays on");
        }

        Bench.Chain.Bleeder = on;
    }
}
