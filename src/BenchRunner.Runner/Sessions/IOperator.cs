using BenchRunner.Acceptance.Plans;
using BenchRunner.Runner.Devices;

namespace BenchRunner.Runner.Sessions;

/// <summary>The person at the bench: lets it be energised after every closing of the enclosure, and says where a device
/// that was not accepted was put.</summary>
public interface IOperator
{
    /// <summary>Whether there is a person who can be asked.</summary>
    bool CanAsk { get; }

    /// <summary>Shows the cautions and asks; input that waited beforehand is discarded, so that a scanner never
    /// arms. Where clamps wait to be degaussed, the question says so first.</summary>
    /// <param name="plan">What would be done.</param>
    /// <param name="closing">The closed enclosure that the confirmation is for.</param>
    /// <param name="cancel">Ends the waiting: the run is over, or the enclosure was opened again.</param>
    /// <returns>Who confirmed it; null where it was declined or there is nobody to ask.</returns>
    Task<Confirmation?> Confirm(Plan plan, Closing closing, CancellationToken cancel);

    /// <summary>Asks where a device that was not accepted was put.</summary>
    /// <param name="report">The device and its outcome.</param>
    /// <param name="cancel">Ends the waiting.</param>
    /// <returns>The place in the person's words; null where the person has left.</returns>
    Task<string?> WherePut(DeviceReport report, CancellationToken cancel);
}
