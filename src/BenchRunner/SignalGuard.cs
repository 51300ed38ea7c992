using System.Runtime.InteropServices;

namespace BenchRunner;

/// <summary>Turns the signals that end a program into a cancelled token: the way out leads through the safe
/// state.</summary>
/// <remarks>Once or ten times makes no difference: only the first cancels, none kills.</remarks>
internal sealed class SignalGuard : IDisposable
{
    private readonly List<PosixSignalRegistration> _registrations = [];

    public static SignalGuard Cancelling(CancellationTokenSource stop)
    {
        var guard = new SignalGuard();
        foreach (PosixSignal signal in
            (PosixSignal[])[PosixSignal.SIGINT, PosixSignal.SIGTERM, PosixSignal.SIGHUP, PosixSignal.SIGQUIT])
        {
            guard._registrations.Add(PosixSignalRegistration.Create(signal, context =>
            {
                context.Cancel = true;
                stop.Cancel();
            }));
        }

        return guard;
    }

    public void Dispose() => _registrations.ForEach(registration => registration.Dispose());
}
