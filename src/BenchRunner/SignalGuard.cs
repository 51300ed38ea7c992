using System.Runtime.InteropServices;

namespace BenchRunner;

/// <summary>Turns the signals that end a program into a cancelled token: the way out leads through the safe
/// state.</summary>
/// <remarks>Once or ten times makes no difference: only the first cancels, none kills. That a file has reached its
/// greatest size is an error of the write, and no end of the program.</remarks>
internal sealed class SignalGuard : IDisposable
{
    /// <summary>SIGXFSZ, on Linux and macOS.</summary>
    private const PosixSignal FileTooLarge = (PosixSignal)25;

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

        if (!OperatingSystem.IsWindows())
        {
            guard._registrations.Add(PosixSignalRegistration.Create(FileTooLarge, context => context.Cancel = true));
        }

        return guard;
    }

    public void Dispose() => _registrations.ForEach(registration => registration.Dispose());
}
