using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Safety.Supervision;

/// <summary>Asks an instrument that the run itself asks now and then only whether it is still there, on a connection of
/// safety's own, in a task of its own, as long as there is leave to energise.</summary>
/// <param name="output">Whom to ask.</param>
/// <param name="within">How long it may take to answer.</param>
/// <param name="time">The clock.</param>
internal sealed class Heartbeat(IOutput output, TimeSpan within, TimeProvider time) : IDisposable
{
    private readonly CancellationTokenSource _end = new();
    private Task _asking = Task.CompletedTask;

    /// <summary>Where the run stands.</summary>
    public required Func<SupervisorState> State { get; init; }

    /// <summary>Takes where the run stood when the instrument was asked, and whether its output is on.</summary>
    public required Action<SupervisorState, bool> Answered { get; init; }

    /// <summary>Told, with the reason, that there was no answer in time.</summary>
    public required Action<string> Silent { get; init; }

    /// <summary>Begins.</summary>
    public void Begin() => _asking = Background.Start(Beat);

    /// <summary>Asks for the end and waits for the last answer.</summary>
    public async Task End()
    {
        _end.Cancel();
        await _asking;
    }

    /// <inheritdoc/>
    public void Dispose() => _end.Dispose();

    private async Task Beat()
    {
        using var timer = new PeriodicTimer(SafetyLimits.HeartbeatEvery, time);
        try
        {
            while (await timer.WaitForNextTickAsync(_end.Token))
            {
                SupervisorState asked = State();
                if (SupervisorTable.HasPermit(asked))
                {
                    await Ask(asked);
                }
            }
        }
        catch (OperationCanceledException) when (_end.IsCancellationRequested)
        {
            // The run has ended.
        }
    }

    private async Task Ask(SupervisorState asked)
    {
        try
        {
            // Ended by its own patience: cancelling it would leave its reply on the line.
            Task<bool> answer = output.ReadOutput(CancellationToken.None);
            try
            {
                await answer.WaitAsync(within, time);
            }
            catch (TimeoutException)
            {
                Silent($"the {output.Role} gives no sign of life: no word within {within.TotalSeconds:0.##} s");
            }

            Answered(asked, await answer);
        }
        catch (Exception lost)
        {
            Silent($"the {output.Role} gives no sign of life: {lost.Message}");
        }
    }
}
