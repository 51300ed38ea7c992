using System.Globalization;

namespace FakeBench.Hosting;

/// <summary>Says on standard output, a line each, when all outputs went off or on and when the bank fell below 60 V or rose
/// above: <c>state outputs-off 1234.5678</c>, seconds of the machine's monotonic clock, the same in every process.</summary>
/// <remarks>Looks every millisecond: so exact are its times.</remarks>
internal static class StateTeller
{
    private static readonly TimeSpan LookEvery = TimeSpan.FromMilliseconds(1);

    public static async Task Tell(BenchServer server, TextWriter to, TimeProvider time, CancellationToken stop)
    {
        using var timer = new PeriodicTimer(LookEvery, time);
        BenchTruth told = server.Look();
        try
        {
            while (await timer.WaitForNextTickAsync(stop))
            {
                BenchTruth now = server.Look();
                if (now.OutputsOff != told.OutputsOff)
                {
                    Say(now.OutputsOff ? "outputs-off" : "outputs-on");
                }

                if (now.IsDown != told.IsDown)
                {
                    Say(now.IsDown ? "bus-down" : "bus-up");
                }

                told = now;
            }
        }
        catch (OperationCanceledException)
        {
            // The bench ends.
        }

        void Say(string what)
        {
            double seconds = time.GetTimestamp() / (double)time.TimestampFrequency;
            to.WriteLine(string.Create(CultureInfo.InvariantCulture, $"state {what} {seconds:0.0000}"));
        }
    }
}
