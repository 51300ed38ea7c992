using System.Globalization;
using BenchRunner.Acceptance.Benches;

namespace BenchRunner.Runner.Checks;

/// <summary>The settings of each role that would endanger a run.</summary>
internal static class RoleChecks
{
    private const int WaitsForTrigger = 5;

    /// <summary>Reads them. The bank's voltage comes first: nothing is tested while it is up.</summary>
    public static Task Of(CheckedInstrument at, Bench bench, CancellationToken cancel) => at.Role switch
    {
        "supply" => Supply(at, bench, cancel),
        "pulser" => Pulser(at, cancel),
        "scope" => Scope(at, bench, cancel),
        "voltmeter" => Voltmeter(at, bench, cancel),
        "interlock" => Interlock(at, cancel),
        _ => Hotplate(at, cancel),
    };

    private static async Task Supply(CheckedInstrument at, Bench bench, CancellationToken cancel)
    {
        bool on = await at.Flag("read-output", cancel);
        if (on)
        {
            at.Unfit("its output is on; switch it off, find out who switched it on, and treat the bank as charged");
        }

        if (await at.Flag("protection-tripped", cancel))
        {
            at.Unfit("its over-voltage protection has tripped; find out why, then clear it");
        }

        await at.Number("read-voltage", "V", cancel);
        if (await at.Number("read-current", "A", cancel) is { } limit && limit > bench.ChargingCurrent)
        {
            // No danger: a run sets it and asks it back before the output goes on, and what it can feed is the supply's
            // own matter until then.
            at.Note(Text($"its current limit is at {limit:G4} A, above the charging current of ")
                + Text($"{bench.ChargingCurrent:G4} A; a run sets it before anything is charged"));
        }

        if (await at.Number("read-protection", "V", cancel) is { } level && level > bench.Envelope.Voltage)
        {
            at.Unfit(Text($"its over-voltage protection is at {level:0.#} V, above the envelope of ")
                + Text($"{bench.Envelope.Voltage:0.#} V: until a run has set its own, nothing but the supply's range ")
                + Text($"bounds the bank; set it to {bench.Envelope.Voltage:0.#} V or less"));
        }
    }

    private static async Task Pulser(CheckedInstrument at, CancellationToken cancel)
    {
        if (await at.Flag("read-output", cancel))
        {
            at.Unfit("its gate output is on; switch it off and find out who switched it on");
        }

        if (IsSet(await at.Number("read-condition", "", cancel), WaitsForTrigger))
        {
            at.Unfit("it is armed; abort it and find out who armed it");
        }

        await at.Number("read-gate-on", "V", cancel);
        await at.Number("read-gate-off", "V", cancel);
    }

    private static async Task Scope(CheckedInstrument at, Bench bench, CancellationToken cancel)
    {
        foreach (ChannelSetup channel in bench.Channels.Where(c => c.Attenuation is not null).OrderBy(c => c.Input))
        {
            if (await at.Number("read-attenuation", "", cancel, channel.Input) is { } factor
                && !(Math.Abs(factor - channel.Attenuation!.Value) <= 0.01 * channel.Attenuation.Value))
            {
                at.Unfit(Text($"input {channel.Input} takes its probe for {factor:G4}:1 where the bench file says ")
                    + Text($"{channel.Attenuation:G4}:1, and a run would set what the file says: look at the probe and its ")
                    + "switch, then put right which of the two is wrong");
            }
        }
    }

    private static async Task Voltmeter(CheckedInstrument at, Bench bench, CancellationToken cancel)
    {
        double down = bench.Safety.BusDown;
        if (await at.Number("measure-voltage", "V", cancel) is { } volts && !(Math.Abs(volts) < down))
        {
            at.Unfit(Text($"the bank reads {volts:0.0} V, not below {down:0.#} V: treat it as charged and discharge it ")
                + "by your lab's procedure");
        }
    }

    private static async Task Interlock(CheckedInstrument at, CancellationToken cancel)
    {
        bool[] state = await at.Flags("read-state", cancel);
        if (state.Length != 4)
        {
            at.Unfit($"it answers {state.Length} flags where 4 are due: loop, emergency stop, bleeder, watchdog");
            return;
        }

        if (!state[0])
        {
            at.Note("the enclosure's loop is open; a run waits until it is closed");
        }

        if (state[1])
        {
            at.Unfit("the emergency stop is pressed; find out why before it is released");
        }

        if (!state[2])
        {
            at.Unfit("the bleeder is not across the bank; engage it");
        }

        if (state[3])
        {
            at.Unfit("its watchdog has acted: a run was lost here; look at the bench before anything else");
        }

        if (await at.Number("read-watchdog", "s", cancel) is > 0)
        {
            at.Note("its watchdog is armed though no run holds this bench; another program may be feeding it");
        }
    }

    private static async Task Hotplate(CheckedInstrument at, CancellationToken cancel)
    {
        if (await at.Flag("read-output", cancel))
        {
            at.Unfit("its heating is on; switch it off and find out who switched it on");
        }

        await at.Number("measure-temperature", "degC", cancel);
    }

    private static bool IsSet(double? register, int bit) =>
        register is { } value && ((long)value & (1L << bit)) != 0;

    private static string Text(FormattableString text) => text.ToString(CultureInfo.InvariantCulture);
}
