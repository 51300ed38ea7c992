using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Uncertainty;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Runner.Points;

/// <summary>What firing at one operating point has given so far.</summary>
/// <param name="name">The operating point.</param>
/// <param name="bench">The bench: stated uncertainties.</param>
/// <param name="settings">What the analysis takes as given.</param>
public sealed class PointTaken(string name, Bench bench, AnalysisSettings settings)
{
    private readonly List<ValidCapture> _valid = [];
    private readonly List<Verdict> _verdicts = [];
    private BenchBudget? _budget;

    /// <summary>How many captures were taken, valid or not.</summary>
    public int Taken { get; internal set; }

    /// <summary>The valid captures, in the order taken.</summary>
    public IReadOnlyList<ValidCapture> Valid => _valid;

    /// <summary>What validity said of every capture, valid or not, in the order taken.</summary>
    public IReadOnlyList<Verdict> Verdicts => _verdicts;

    /// <summary>What the decision rests on: the analyses, and the budget formed on the first valid capture.</summary>
    public PointCaptures ForDecision()
    {
        if (_budget is null && _valid.Count > 0)
        {
            _budget = BenchBudget.Of(_valid[0].Traces, bench, settings);
        }

        return new PointCaptures(name, Taken, [.. _valid.Select(capture => capture.Result)], _budget);
    }

    internal void Judged(Verdict verdict) => _verdicts.Add(verdict);

    internal void Add(ValidCapture capture) => _valid.Add(capture);
}
