using System.Globalization;
using System.Text;
using FakeBench.Fixtures;
using FakeBench.Physics;
using FakeBench.Probes;

namespace FakeBench.Hosting;

/// <summary>Writes a bench file that reaches the instruments.</summary>
public static class BenchFile
{
    // Envelope of the plate, degC: below what its controller can be set to.
    private const double HottestPlate = 150;

    /// <summary>The text of the file.</summary>
    /// <param name="options">What is served.</param>
    /// <param name="links">Roles and their links.</param>
    public static string Write(ServeOptions options, IReadOnlyList<(string Role, string Link)> links)
    {
        ArgumentNullException.ThrowIfNull(options);
        ArgumentNullException.ThrowIfNull(links);
        var values = new BenchValues(options.Pace);
        BenchParts parts = values.Parts;
        var text = new StringBuilder();
        void Line(FormattableString line) => text.Append(line.ToString(CultureInfo.InvariantCulture)).Append('\n');
        Line($"# Written by FakeBench: reaches its instruments as long as it runs.");
        Line($"format: 1");
        Line($"bench: fakebench");
        Line($"roles:");
        foreach ((string role, string link) in links)
        {
            Line($"  {role}: {{ link: '{Written(link)}', dialect: generic-{role}{Extra(options, role, link)} }}");
        }

        double loop = LoopInductance(parts) * 1e9;
        Line($"exchange: {(options.ByHand ? "by-hand" : "none")}");
        string rail = options.LoadToNegative ? "negative" : "positive";
        (double load, double resistance) = (parts.LoadInductance * 1e6, parts.LoadResistance * 1e3);
        Line($"load: {{ inductance: {load:0.###} uH, resistance: {resistance:0.###} mOhm, to: {rail} }}");
        (double bank, double bleeder) = (parts.BankCapacitance * 1e6, values.Bleeder / 1e3);
        Line($"bus: {{ capacitance: {bank:0.###} uF, bleeder: {bleeder:0.###} kOhm, empty-socket: 0.1 mA }}");
        double accuracy = Instruments.Supply.CurrentAccuracy * 1e3;
        double limit = values.SupplyLimit;
        Line($"supply: {{ charging-current: {limit:0.###} A, current-accuracy: {accuracy:0.###} mA }}");
        int points = Instruments.Scope.MostPoints;
        Line($"scope: {{ bits: {options.Bits}, fastest-interval: 1 ns, samples-at-most: {points} }}");
        Line($"loop: {{ inductance: {loop:0.#} nH }}");
        (double on, double off) = (parts.GateOnResistance, parts.GateOffResistance);
        Line($"gate-resistors: {{ on: {on:0.###} Ohm, off: {off:0.###} Ohm }}");
        Line($"high-side: {{ gate-threshold: 0.5 V }}");
        (double shunt, double sense) = (parts.ShuntResistance * 1e3, parts.ShuntSenseInductance * 1e12);
        if (!options.LoadToNegative)
        {
            Line($"shunt: {{ resistance: {shunt:0.###} mOhm, inductance: {sense:0.###} pH }}");
        }

        Line($"channels:");
        for (int i = 0; i < options.Channels.Count; i++)
        {
            string channel = options.Channels[i];
            Line($"  {channel}: {{ scope: {i + 1}, {Probe(channel, options.LoadToNegative)} }}");
        }

        string plate = options.Hotplate ? $", temperature: {HottestPlate:0} degC" : "";
        Line($"envelope: {{ voltage: {BenchValues.Envelope:0} V, current: 120 A, energy: 10 J, pulse: 20 us{plate} }}");
        Line($"ambient: {options.Ambient:0.##} degC");
        Line($"cautions: []");
        return text.ToString();
    }

    private static double LoopInductance(BenchParts parts)
    {
        PackageParts low = CircuitParameters.NominalPlace(high: false).Package;
        PackageParts high = CircuitParameters.NominalPlace(high: true).Package;
        return parts.BankInductance + high.DrainInductance + low.DrainInductance + low.SourceInductance;
    }

    private static string Written(string link) =>
        link.Split(' ') is ["tcp", { } host, { } port] ? $"tcp {host}:{port}" : link;

    private static string Extra(ServeOptions options, string role, string link)
    {
        bool single = link.StartsWith("serial", StringComparison.Ordinal)
            || options.Faults.Any(f => f.Name == Faults.FaultCatalogue.SingleClient);
        return (single ? "" : ", connections: 4") + (role == "voltmeter" ? ", at: bank" : "")
            + $", identity: '.*FAKEBENCH-{role.ToUpperInvariant()}.*'";
    }

    private static string Probe(string channel, bool loadToNegative)
    {
        ProbeChannel probe = BenchProbes.Of(channel, loadToNegative);
        string facts = string.Create(
            CultureInfo.InvariantCulture,
            $"bandwidth: {probe.Bandwidth / 1e6:0} MHz, attenuation: {probe.Attenuation:0}, gain: 1, ");
        return channel switch
        {
            "id_low" when !loadToNegative => $"probe: shunt, rating: 200 A, {facts}skew: 0 s, "
                + "uncertainty: { gain: 0.5 %, offset: 100 mA, skew: 200 ps }",
            "id_low" or "id_high" or "i_load" =>
                $"probe: transformer, rating: 200 A, common-mode: 1500 V, {facts}skew: 0 s, "
                + "uncertainty: { gain: 0.5 %, offset: 100 mA, skew: 200 ps }",
            "vgs_low" or "vgs_high" => $"probe: isolated, rating: 50 V, common-mode: 1500 V, {facts}"
                + "offset: 0 V, skew: 0 s, uncertainty: { gain: 1 %, offset: 50 mV, skew: 300 ps }",
            "vbus" => $"probe: differential, rating: 1500 V, common-mode: 1500 V, {facts}offset: 0 V, skew: 0 s, "
                + "uncertainty: { gain: 0.5 %, offset: 500 mV, skew: 500 ps }",
            _ => $"probe: differential, rating: 1500 V, common-mode: 1500 V, {facts}offset: 0 V, skew: 0 s, "
                + "uncertainty: { gain: 0.5 %, offset: 200 mV, skew: 200 ps }",
        };
    }
}
