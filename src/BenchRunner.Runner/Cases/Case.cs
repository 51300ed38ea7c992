using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Runner.Cases;

/// <summary>One limit at one operating point for one device: it decides, the point's fixture has fired.</summary>
/// <param name="Device">Serial.</param>
/// <param name="Limit">The limit.</param>
public sealed record Case(string Device, Limit Limit)
{
    /// <summary>The case's one result, out of what was decided about the device.</summary>
    public CaseResult Result(DeviceDecision decision)
    {
        ArgumentNullException.ThrowIfNull(decision);
        MeasuredValue? value = decision.Values.FirstOrDefault(IsOfTheLimit);
        CaseEnding ending = value switch
        {
            null or { Captures: 0 } => CaseEnding.NotMeasured,
            { Conformity: Conformity.Conforms } => CaseEnding.Conforms,
            { Conformity: Conformity.Fails } => CaseEnding.Fails,
            _ => CaseEnding.Undecided,
        };
        return new CaseResult(Device, Limit, ending, value, value is null ? decision.Reason : value.Reason);
    }

    private bool IsOfTheLimit(MeasuredValue value) =>
        value.OperatingPoint == Limit.At && value.Quantity == Limit.Quantity && value.Conformity is not null
        && value.Lower == Limit.Lower && value.Upper == Limit.Upper
        && (Limit.Definition is null || value.Definition == Limit.Definition
            || DefinitionId.Split(value.Definition).Rule == Limit.Definition);
}
