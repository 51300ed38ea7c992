namespace BenchRunner.Signals.Traces;

/// <summary>One channel of a capture as the scope gave it: ADC codes with scale and time base.</summary>
/// <param name="Channel">What the trace shows.</param>
/// <param name="Codes">The ADC codes, one a sample; never modified after construction.</param>
/// <param name="TimeOrigin">Time of the first sample against the trigger, s.</param>
/// <param name="SampleInterval">Sample interval, s; above 0.</param>
/// <param name="Increment">Volts or amperes a code.</param>
/// <param name="Origin">Value at the reference code, V or A.</param>
/// <param name="Reference">Reference code: value = (code − reference) · increment + origin.</param>
/// <param name="LowRail">The lowest code the ADC gives; a sample there is clipped.</param>
/// <param name="HighRail">The highest code the ADC gives; a sample there is clipped.</param>
/// <remarks>Not to be confused with <see cref="Waveform"/>, which holds values in V and A after correction.</remarks>
public sealed record RawTrace(
    Channel Channel,
    short[] Codes,
    double TimeOrigin,
    double SampleInterval,
    double Increment,
    double Origin,
    double Reference,
    short LowRail,
    short HighRail)
{
    /// <summary>The span of the ADC from rail to rail, V or A.</summary>
    public double FullScale => (HighRail - LowRail) * Increment;

    /// <summary>The value of a code, V or A.</summary>
    public double Value(short code) => ((code - Reference) * Increment) + Origin;
}
