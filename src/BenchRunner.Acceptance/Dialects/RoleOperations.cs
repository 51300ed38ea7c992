namespace BenchRunner.Acceptance.Dialects;

/// <summary>The operations of each role: what a dialect file of that role must, or if optional may, give a command
/// for.</summary>
public static class RoleOperations
{
    /// <summary>Operations by role.</summary>
    public static IReadOnlyDictionary<string, IReadOnlyList<RoleOperation>> All { get; } =
        new Dictionary<string, IReadOnlyList<RoleOperation>>
        {
            ["supply"] =
            [
                .. Setting("voltage"), .. Setting("current"), .. Setting("protection"),
                Ask("protection-tripped"),
                Do("output-on"), Do("output-off"), Ask("read-output"),
                Ask("measure-voltage"), Ask("measure-current"), Ask("read-condition"), .. Checks,
            ],
            ["pulser"] =
            [
                .. Setting("first-width"), .. Setting("gap"), .. Setting("second-width"),
                .. Setting("gate-on"), .. Setting("gate-off"),
                Do("output-on"), Do("output-off"), Ask("read-output"),
                Do("arm"), Do("fire"), Do("inhibit"), Ask("read-condition"), Ask("read-count"), .. Checks,
            ],
            ["scope"] =
            [
                .. Setting("attenuation", ofChannel: true), .. Setting("range", ofChannel: true),
                .. Setting("offset", ofChannel: true),
                .. Setting("interval"), .. Setting("points"), .. Setting("pretrigger"),
                new("set-trigger-source", false, false, true), Ask("read-trigger-source"),
                .. Setting("trigger-level"), Do("set-trigger-slope"),
                Do("set-format"), Ask("read-format"), Do("set-byte-order"), Ask("read-byte-order"),
                Do("arm"), Do("trigger"), Do("abort"), Ask("read-condition"), Ask("read-count"),
                Ask("read-preamble", ofChannel: true), Ask("read-trace", ofChannel: true),
                new("read-all-preambles", true, false, TakesChannel: true, IsOptional: true),
                new("degauss", false, false, TakesChannel: true, IsOptional: true), .. Checks,
            ],
            ["voltmeter"] = [Ask("measure-voltage"), .. Checks],
            ["interlock"] =
            [
                Ask("read-state"), Do("bleeder-on"), Do("bleeder-off"), Ask("read-bleeder"), .. Setting("watchdog"),
                .. Checks,
            ],
            ["hotplate"] =
            [
                .. Setting("temperature"), Ask("measure-temperature"),
                Do("output-on"), Do("output-off"), Ask("read-output"), .. Checks,
            ],
        };

    /// <summary>What only a check of the bench asks, where the instrument knows it: its self-test, which must energise
    /// nothing, and whether its front panel is locked.</summary>
    private static RoleOperation[] Checks =>
        [new("self-test", true, false, false, IsOptional: true), new("read-lock", true, false, false, IsOptional: true)];

    private static RoleOperation Do(string name) => new(name, false, false, false);

    private static RoleOperation Ask(string name, bool ofChannel = false) => new(name, true, false, ofChannel);

    /// <summary>A value that is set and read back.</summary>
    private static RoleOperation[] Setting(string name, bool ofChannel = false) =>
        [new("set-" + name, false, true, ofChannel), Ask("read-" + name, ofChannel)];
}
