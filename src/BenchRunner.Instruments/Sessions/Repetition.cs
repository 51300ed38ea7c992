using System.Runtime.CompilerServices;
using BenchRunner.Instruments.Links;
using Polly;
using Polly.Retry;

namespace BenchRunner.Instruments.Sessions;

/// <summary>How often something that is safe to repeat is tried where the link failed.</summary>
/// <remarks>It goes on where its caller runs: a run on one simulated thread stays on it.</remarks>
internal sealed class Repetition
{
    private readonly ResiliencePipeline _pipeline;

    private Repetition(ResiliencePipeline pipeline) => _pipeline = pipeline;

    /// <summary>A repetition.</summary>
    /// <param name="attempts">Attempts in all, at least 1.</param>
    /// <param name="pause">Pause before the second attempt; doubled before each further one.</param>
    /// <param name="time">The clock of the pauses.</param>
    /// <exception cref="ArgumentOutOfRangeException">No attempt at all.</exception>
    public static Repetition Of(int attempts, TimeSpan pause, TimeProvider time)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(attempts, 1);
        var builder = new ResiliencePipelineBuilder { TimeProvider = time };
        if (attempts > 1)
        {
            builder.AddRetry(new RetryStrategyOptions
            {
                MaxRetryAttempts = attempts - 1,
                Delay = pause,
                BackoffType = DelayBackoffType.Exponential,
                ShouldHandle = new PredicateBuilder().Handle<LinkException>(),
            });
        }

        return new Repetition(builder.Build());
    }

    /// <summary>Does the work, again where a link failed in it.</summary>
    /// <typeparam name="T">What it gives.</typeparam>
    /// <typeparam name="TState">What it needs.</typeparam>
    /// <param name="work">The work.</param>
    /// <param name="state">Handed to it.</param>
    /// <param name="cancel">Ends it.</param>
    /// <exception cref="LinkException">The last attempt failed too.</exception>
    [AsyncMethodBuilder(typeof(PoolingAsyncValueTaskMethodBuilder<>))]
    public async ValueTask<T> Run<T, TState>(
        Func<TState, CancellationToken, ValueTask<T>> work, TState state, CancellationToken cancel)
    {
        var context = ResilienceContextPool.Shared.Get(continueOnCapturedContext: true, cancel);
        try
        {
            return await _pipeline.ExecuteAsync(
                static (context, of) => of.Work(of.State, context.CancellationToken), context, (Work: work, State: state));
        }
        finally
        {
            ResilienceContextPool.Shared.Return(context);
        }
    }
}
