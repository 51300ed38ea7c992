namespace BenchRunner.Instruments.Sessions;

/// <summary>Starts work that goes on beside its caller.</summary>
public static class Background
{
    /// <summary>Starts it on the caller's scheduler, so that a single-threaded one keeps all work on its one
    /// thread.</summary>
    /// <param name="work">The work; a token of its own ends it, if any does.</param>
    /// <returns>The work under way; it carries what the work throws.</returns>
    public static Task Start(Func<Task> work) => Start(async () =>
    {
        await work();
        return true;
    });

    /// <inheritdoc cref="Start(Func{Task})"/>
    /// <typeparam name="T">What the work gives.</typeparam>
    public static Task<T> Start<T>(Func<Task<T>> work) => Task.Factory.StartNew(
        work, CancellationToken.None, TaskCreationOptions.DenyChildAttach, TaskScheduler.Current).Unwrap();
}
