namespace BenchRunner.Acceptance.Schemas;

/// <summary>Quantities that a limit may name: their unit and the IDs of their definitions.</summary>
internal static class KnownQuantities
{
    private static readonly string[] _trr =
        ["trr/chord-90-25", "trr/fall-2", "trr/fall-5", "trr/fall-10", "trr/fall-25"];

    private static readonly string[] _raw = ["peak/raw", "peak/parabola-20"];

    private static readonly Dictionary<string, (string Unit, string[] Definitions)> _all = new()
    {
        ["bus_voltage"] = ("V", ["levels/window", "levels/window-vds"]),
        ["bus_droop"] = ("1", ["droop/first-pulse"]),
        ["i_off"] = ("A", ["iload/ramp"]),
        ["i_on"] = ("A", ["iload/ramp"]),
        ["ramp_slope"] = ("A/s", ["iload/ramp"]),
        ["ramp_straightness"] = ("1", ["iload/ramp"]),
        ["eon"] = ("J", ["e/10-10", "e/10-2"]),
        ["eoff"] = ("J", ["e/10-10", "e/10-2"]),
        ["dvdt_on"] = ("V/s", ["slope/20-80", "slope/10-90"]),
        ["didt_on"] = ("A/s", ["slope/10-90"]),
        ["vds_peak_off"] = ("V", _raw),
        ["id_peak_on"] = ("A", _raw),
        ["vds_high_peak_1"] = ("V", ["peak/ring"]),
        ["vds_high_peak_2"] = ("V", ["peak/ring"]),
        ["vds_high_peak_3"] = ("V", ["peak/ring"]),
        ["vds_on"] = ("V", ["levels/window"]),
        ["irm"] = ("A", ["peak/above-load", "peak/parabola-20"]),
        ["trr"] = ("s", _trr),
        ["qrr"] = ("C", ["qrr/chord-90-25", "qrr/fall-2", "qrr/fall-5", "qrr/fall-10", "qrr/fall-25", "qrr/to-zero"]),
        ["ta"] = ("s", _trr),
        ["tb"] = ("s", _trr),
        ["ring_frequency"] = ("Hz", ["ring/fit"]),
        ["ring_damping"] = ("1", ["ring/fit"]),
    };

    /// <summary>The names.</summary>
    public static IReadOnlyList<string> Names { get; } = [.. _all.Keys];

    /// <summary>The SI unit of a quantity.</summary>
    public static string UnitOf(string name) => _all[name].Unit;

    /// <summary>The IDs of its definitions, default first.</summary>
    public static IReadOnlyList<string> DefinitionsOf(string name) => _all[name].Definitions;
}
