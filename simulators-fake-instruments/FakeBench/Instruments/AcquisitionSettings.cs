namespace FakeBench.Instruments;

/// <summary>Time base, trigger and inputs of the scope.</summary>
/// <param name="Interval">Sample interval, s.</param>
/// <param name="Points">Samples an input.</param>
/// <param name="Pretrigger">Time from the first sample to the trigger, s.</param>
/// <param name="Source">Input whose crossing triggers, from 1.</param>
/// <param name="Level">Level of the crossing, V or A.</param>
/// <param name="Rising">Whether it must rise.</param>
/// <param name="Inputs">The inputs, first to last.</param>
public sealed record AcquisitionSettings(
    double Interval,
    int Points,
    double Pretrigger,
    int Source,
    double Level,
    bool Rising,
    IReadOnlyList<InputSettings> Inputs);
