using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>Takes what the criteria find; becomes a <see cref="Verdict"/>.</summary>
internal sealed class Judgement
{
    private readonly List<Finding> _findings = [];
    private readonly List<string> _notEvaluated = [];
    private readonly Dictionary<Channel, bool> _nextRange = [];

    /// <summary>Width of the next first pulse, s; null: unchanged.</summary>
    public double? CorrectedFirstPulse { get; set; }

    /// <summary>Whether a criterion found something so far.</summary>
    public bool Has(string criterion) => _findings.Exists(finding => finding.Criterion == criterion);

    /// <summary>Whether a channel was found at the ADC's rails.</summary>
    public bool IsClipped(Channel channel) =>
        _findings.Exists(finding => finding.Criterion == Criteria.NotClipped && finding.Channel == channel);

    /// <summary>Adds a finding.</summary>
    public void Add(
        string criterion,
        FindingClass does,
        string message,
        Channel? channel = null,
        double? seen = null,
        double? bound = null,
        double? at = null) =>
        _findings.Add(new Finding(criterion, does, channel, seen, bound, at, message));

    /// <summary>Adds findings.</summary>
    public void Add(IEnumerable<Finding> findings) => _findings.AddRange(findings);

    /// <summary>Notes that a criterion could not be evaluated; it is then not met either.</summary>
    public void NotEvaluated(string criterion)
    {
        if (!_notEvaluated.Contains(criterion))
        {
            _notEvaluated.Add(criterion);
        }
    }

    /// <summary>Asks for another range of a channel; a wider one outweighs a narrower one.</summary>
    public void NextRange(Channel channel, bool wider) =>
        _nextRange[channel] = wider || _nextRange.GetValueOrDefault(channel);

    /// <summary>The verdict so far.</summary>
    public Verdict ToVerdict() => new(_findings, _notEvaluated, CorrectedFirstPulse, _nextRange);
}
