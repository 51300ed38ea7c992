using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Acceptance.Tests.Physics;

/// <summary>
/// A device whose diode recovers from half to three times the nominal charge has the same captures taken and kept.
/// </summary>
/// <remarks>
/// Most of a fast part's recovery charge is that of its output capacitance, which no diode's lifetime can take away. So
/// the part here has a fifth of the junction capacitance, and its diode's lifetime alone makes the charge.
/// </remarks>
public sealed class RecoveryBlindnessTests
{
    private const double LittleCapacitance = 0.2;

    /// <summary>
    /// Difference of widths that is none, s: with another diode the solver takes other steps, and a code in a hundred
    /// thousand of the first ramp falls on its other side.
    /// </summary>
    private const double SamePulse = 1e-12;

    /// <summary>
    /// Factors of the diode's lifetime by operating point, from under half of the nominal charge to over three times.
    /// </summary>
    private static readonly Dictionary<string, double[]> _lifetimes = new()
    {
        ["half"] = [0.15, 1.5, 3, 5, 6.4],
        ["rated"] = [0.1, 1, 2, 3.5, 4.7],
    };

    private static readonly Plan _plan = Planner.Plan(Shipped.Sequence, Shipped.Bench).Plan!;

    private static FiredBench Device(string serial, int seed, double lifetime) => new(Shipped.Sequence, Shipped.Bench)
    {
        Serial = serial,
        Seed = seed,
        Part = device => device with
        {
            High = device.High with
            {
                Switch = device.High.Switch with
                {
                    JunctionCapacitance = LittleCapacitance * device.High.Switch.JunctionCapacitance,
                },
                Diode = device.High.Diode with { Lifetime = lifetime * device.High.Diode.Lifetime },
            },
        },
    };

    /// <summary>
    /// A bench that gives the loop something to do: its inductor is 4 % above its file, so that the first pulse is
    /// corrected, and every third train comes before the bus is back.
    /// </summary>
    private static FiredBench Restless(FiredBench bench) => bench with
    {
        Fixture = parts => parts with { LoadInductance = 1.04 * parts.LoadInductance },
        BusShare = fire => fire % 3 == 2 ? 0.985 : 1,
    };

    [Fact]
    public void Recovery_from_half_to_three_times_nominal_changes_neither_what_is_kept_nor_what_is_taken() =>
        SameCaptures("W1200-0001", 1, lifetimes => [lifetimes[0], lifetimes[^1]]);

    [Theory, Trait("kind", "slow")]
    [InlineData("W1200-0002", 1)]
    [InlineData("W1200-0003", 7)]
    [InlineData("W1200-0100", 42)]
    public void The_same_for_other_devices_and_seeds(string serial, int seed) =>
        SameCaptures(serial, seed, lifetimes => lifetimes);

    [Theory]
    [InlineData(0.1)]
    [InlineData(6.4)]
    public void A_proving_train_is_sound_whatever_the_recovery(double lifetime)
    {
        PlannedPoint proving = _plan.Proving;
        Verdict verdict = ProvingJudge.Judge(PointLoop.Context(
            Device("W1200-0001", 1, lifetime), proving, PointLoop.Start(proving), proving.Ranges, [], 1));
        Assert.Empty(verdict.Findings.Select(finding => finding.Message));
    }

    private static void SameCaptures(string serial, int seed, Func<double[], double[]> some)
    {
        foreach (PlannedPoint planned in _plan.Points)
        {
            var sound = new FiredBench(Shipped.Sequence, Shipped.Bench) { Serial = serial, Seed = seed };
            double nominal = Charge(sound, planned);
            List<TakenCapture>? first = null;
            var charges = new List<double>();
            foreach (double lifetime in some(_lifetimes[planned.Point.Name]))
            {
                var kept = new List<AnalysisResult>();
                List<TakenCapture> taken = PointLoop.Take(Restless(Device(serial, seed, lifetime)), planned, kept);
                first ??= taken;
                Assert.Equal(first.Select(Outcome), taken.Select(Outcome));
                Assert.All(first.Zip(taken), pair =>
                    Assert.Equal(pair.First.FirstPulse, pair.Second.FirstPulse, SamePulse));
                charges.Add(Charge(kept[0]));
            }

            // The property says something only where captures were rejected, a width corrected, and the charge went
            // all the way.
            Assert.Contains(first!, capture => capture.Findings.Contains("bus-within", StringComparison.Ordinal));
            Assert.True(first![^1].FirstPulse > 1.02 * planned.FirstPulse);
            Assert.True(charges.Min() < 0.5 * nominal, $"{charges.Min():g3} of {nominal:g3} C at the least");
            Assert.True(charges.Max() > 3 * nominal, $"{charges.Max():g3} of {nominal:g3} C at the most");
        }
    }

    private static (int Number, bool IsKept, string Findings) Outcome(TakenCapture capture) =>
        (capture.Number, capture.IsKept, capture.Findings);

    private static double Charge(FiredBench bench, PlannedPoint planned) => Charge(PointLoop.Context(
        bench, planned, PointLoop.Start(planned), planned.Ranges, [], 1).Analysis);

    private static double Charge(AnalysisResult analysis) =>
        analysis.Quantities.Single(value => value.Quantity == "qrr").Value!.Value;
}
