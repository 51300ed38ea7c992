namespace BenchRunner.Safety.Tests;

/// <summary>Waits for what a real program does, bounded.</summary>
internal static class Eventually
{
    private static readonly TimeSpan Bound = TimeSpan.FromSeconds(30);
    private static readonly TimeSpan Pause = TimeSpan.FromMilliseconds(2);

    public static Task True(Func<bool> condition, string what) => True(() => Task.FromResult(condition()), what);

    public static async Task True(Func<Task<bool>> condition, string what)
    {
        long began = TimeProvider.System.GetTimestamp();
        while (!await condition())
        {
            Assert.True(TimeProvider.System.GetElapsedTime(began) < Bound, $"did not come about: {what}");
            await Task.Delay(Pause, TimeProvider.System);
        }
    }
}
