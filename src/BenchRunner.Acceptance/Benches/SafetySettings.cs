namespace BenchRunner.Acceptance.Benches;

/// <summary>When a bank counts as down, and how soon silence counts as a fault. A bench may be stricter than the
/// defaults, and less strict only where its bound says so; the lab's own rules and the codes of its place come
/// first.</summary>
/// <param name="BusDown">Voltage below which the bus counts as down, V DC; 60 at most.</param>
/// <param name="EnergyDown">Energy in the bank below which it counts as down, J; 0.35 at most. Both must
/// hold.</param>
/// <param name="DischargeWithin">Time in which the bleeder must bring the bank down, s.</param>
/// <param name="ReplyWithin">How long the watch waits for interlock and voltmeter, s.</param>
/// <param name="GuardianSilence">How long the guardian bears silence of the run before it acts, s.</param>
/// <remarks>
/// All from memory of the standards, which this program's makers do not hold: 60 V DC is the limit that IEC 60204-1
/// and other standards put on the residual voltage of live parts (half the 120 V DC of extra-low voltage in
/// IEC 61140); 350 mJ is the limit of EN 50191 for the discharge energy that a touch may give; IEC 60204-1 asks for
/// 5 s after switching off, and 1 s where conductors are bared by a plug; where a machine cannot, for a durable
/// warning.
/// </remarks>
public sealed record SafetySettings(
    double BusDown = SafetySettings.UsualBusDown,
    double EnergyDown = SafetySettings.UsualEnergyDown,
    double DischargeWithin = 5,
    double ReplyWithin = 0.35,
    double GuardianSilence = 0.5)
{
    /// <summary>Voltage below which a bus counts as down where the file does not say, V DC; also the
    /// highest.</summary>
    public const double UsualBusDown = 60;

    /// <summary>Energy below which a bank counts as down where the file does not say, J; also the highest.</summary>
    public const double UsualEnergyDown = 0.35;

    /// <summary>By how much the guardian must be more patient than the watch, s: a poll whose last reply was waited for to
    /// the end, the pause before it, and the way of the beat; otherwise it would end a run that is about to trip.</summary>
    public const double SilenceBeyondReply = 0.15;

    /// <summary>What a bench has whose file does not say.</summary>
    public static SafetySettings Usual { get; } = new();

    /// <summary>Voltage below which a bank counts as down by voltage and by energy ½CV², V.</summary>
    /// <param name="capacitance">The bank, F.</param>
    /// <example>50 µF: 60 V, where it holds 90 mJ; 1 mF: 26.5 V, where it holds 350 mJ.</example>
    public double DownBelow(double capacitance) => Math.Min(BusDown, Math.Sqrt(2 * EnergyDown / capacitance));
}
