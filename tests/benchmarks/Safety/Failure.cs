namespace BenchRunner.Benchmarks;

/// <summary>One thing that fails.</summary>
/// <param name="Name">Its name.</param>
/// <param name="Do">Lets it fail.</param>
internal sealed record Failure(string Name, Action<Trial> Do)
{
    private const int Kill = 9;
    private const int Stop = 19;

    /// <summary>All that are tried. Silent: the instrument obeys and answers nothing more.</summary>
    public static IReadOnlyList<Failure> All { get; } =
    [
        new("run killed", trial => Trial.Signal(trial.Runner, Kill)),
        new("run stopped", trial => Trial.Signal(trial.Runner, Stop)),
        new("guardian killed", trial => Trial.Signal(trial.Guardian, Kill)),
        new("guardian stopped", trial => Trial.Signal(trial.Guardian, Stop)),
        new("interlock opened", trial => trial.Hand("open")),
        new("emergency stop", trial => trial.Hand("stop")),
        new("interlock silent", trial => trial.Silence("interlock")),
        new("voltmeter silent", trial => trial.Silence("voltmeter")),
        new("interlock's link cut", trial => trial.Cut("interlock")),
        new("voltmeter's link cut", trial => trial.Cut("voltmeter")),
        new("supply's link cut", trial => trial.Cut("supply")),
        new("pulser's link cut", trial => trial.Cut("pulser")),
        new("supply silent", trial => trial.Silence("supply")),
        new("pulser silent", trial => trial.Silence("pulser")),
    ];
}
