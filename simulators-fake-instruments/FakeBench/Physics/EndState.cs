namespace FakeBench.Physics;

/// <summary>What a train leaves behind, so that the bus can be carried on in closed form.</summary>
/// <param name="At">Time of this state, s after on1.</param>
/// <param name="BankVoltageAfter">Voltage of the bank after the train, V; 0 when the low place ended as a short, since
/// the bank then empties itself through the load within a millisecond.</param>
/// <param name="LoadCurrent">Current still freewheeling in the load, A; it dies in the diode and never comes
/// back.</param>
/// <param name="PeakLowCurrent">Largest current of the low place during the whole train, A.</param>
/// <param name="PeakLowVoltage">Largest drain-source voltage inside the low place, V.</param>
/// <param name="PeakHighVoltage">Largest drain-source voltage inside the high place, V.</param>
/// <param name="LowShorted">The low place is a short now, whether it came so or died in this train.</param>
/// <param name="HighShorted">The high place is a short.</param>
/// <param name="LowDied">The low place died in this train: from now on it is a short.</param>
public sealed record EndState(
    double At,
    double BankVoltageAfter,
    double LoadCurrent,
    double PeakLowCurrent,
    double PeakLowVoltage,
    double PeakHighVoltage,
    bool LowShorted,
    bool HighShorted,
    bool LowDied);
