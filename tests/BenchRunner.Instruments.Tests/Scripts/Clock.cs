using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>A clock that the test moves, beside real sockets: nothing times out because the machine is busy.</summary>
internal sealed class Clock : FakeTimeProvider
{
    private static readonly TimeSpan Bound = TimeSpan.FromSeconds(60);

    /// <summary>Waits for real things to happen, bounded.</summary>
    public static async Task Until(Func<bool> condition)
    {
        var began = TimeProvider.System.GetTimestamp();
        while (!condition())
        {
            Assert.True(TimeProvider.System.GetElapsedTime(began) < Bound, "what the test waits for did not happen");
            await Task.Delay(TimeSpan.FromMilliseconds(1), TimeProvider.System);
        }
    }

    /// <summary>Lets the time pass in steps until something has happened.</summary>
    public Task PassUntil(TimeSpan step, Func<bool> condition) => Until(() =>
    {
        if (condition())
        {
            return true;
        }

        Advance(step);
        return false;
    });
}
