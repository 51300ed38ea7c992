using BenchRunner.Acceptance.Plans;

namespace BenchRunner.Runner.Sessions;

/// <summary>The person who lets the bench be energised, asked after every closing of the enclosure.</summary>
public interface IConfirmation
{
    /// <summary>Shows the cautions and asks; input that waited beforehand is discarded, so that a scanner never
    /// arms.</summary>
    /// <param name="plan">What would be done.</param>
    /// <param name="simulated">Whether the bench is simulated: then the cautions are shown and nothing is
    /// asked.</param>
    /// <param name="cancel">Ends the waiting.</param>
    /// <returns>Who confirmed it, e.g. <c>simulated</c>; null where it was declined or there is nobody to
    /// ask.</returns>
    Task<string?> Confirm(Plan plan, bool simulated, CancellationToken cancel);
}
