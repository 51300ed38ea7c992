using BenchRunner.Instruments.Links;
using Polly;
using Polly.Retry;

namespace BenchRunner.Instruments.Sessions;

/// <summary>How often something that is safe to repeat is tried where the link failed.</summary>
internal static class Repetition
{
    /// <summary>A pipeline that repeats.</summary>
    /// <param name="attempts">Attempts in all, at least 1.</param>
    /// <param name="pause">Pause before the second attempt; doubled before each further one.</param>
    /// <param name="time">The clock of the pauses.</param>
    /// <exception cref="ArgumentOutOfRangeException">No attempt at all.</exception>
    public static ResiliencePipeline Of(int attempts, TimeSpan pause, TimeProvider time)
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

        return builder.Build();
    }
}
