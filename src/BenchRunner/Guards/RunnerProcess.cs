using System.ComponentModel;
using System.Diagnostics;
using System.Runtime.InteropServices;
using BenchRunner.Safety.Guardians;
using Microsoft.Win32.SafeHandles;

namespace BenchRunner.Guards;

/// <summary>The runner's process, held so that a later one with the same number is never meant.</summary>
/// <remarks>Linux: by a process descriptor, which names this process for good. Elsewhere: by number and start
/// time.</remarks>
internal sealed partial class RunnerProcess : IRunnerKiller, IDisposable
{
    private const long OpenDescriptor = 434;
    private const long SendSignal = 424;
    private const int Kill = 9;
    private const int NoSuchProcess = 3;
    private const short Readable = 1;
    private static readonly TimeSpan Within = TimeSpan.FromMilliseconds(200);
    private readonly Process _process;
    private readonly SafeFileHandle? _descriptor;
    private readonly DateTime _started;

    private RunnerProcess(Process process, SafeFileHandle? descriptor, DateTime started) =>
        (_process, _descriptor, _started) = (process, descriptor, started);

    /// <summary>Takes hold of the process with a number; the runner is alive then: it waits for the guardian.</summary>
    /// <exception cref="InputException">There is no such process.</exception>
    public static RunnerProcess Hold(int number)
    {
        try
        {
            Process process = Process.GetProcessById(number);
            long descriptor = OperatingSystem.IsLinux() ? Call(OpenDescriptor, number, 0, 0, 0) : -1;
            return new RunnerProcess(
                process,
                descriptor >= 0 ? new SafeFileHandle((nint)descriptor, ownsHandle: true) : null,
                process.StartTime);
        }
        catch (Exception gone) when (gone is ArgumentException or InvalidOperationException or Win32Exception)
        {
            throw new InputException($"--runner {number}: there is no such process");
        }
    }

    /// <inheritdoc/>
    public async Task<string?> End()
    {
        try
        {
            return _descriptor is { } held ? ByDescriptor(held) : await ByNumber();
        }
        catch (Exception failure) when (failure is Win32Exception or InvalidOperationException or OperationCanceledException)
        {
            return failure.Message;
        }
    }

    public void Dispose()
    {
        _descriptor?.Dispose();
        _process.Dispose();
    }

    private static string? ByDescriptor(SafeFileHandle held)
    {
        int number = (int)held.DangerousGetHandle();
        if (Call(SendSignal, number, Kill, 0, 0) < 0)
        {
            int error = Marshal.GetLastPInvokeError();
            return error == NoSuchProcess ? null : Marshal.GetPInvokeErrorMessage(error);
        }

        // A process descriptor becomes readable when its process has ended, and with it its hold on every link.
        var wait = new Waiting { Descriptor = number, Events = Readable };
        return Poll(ref wait, 1, (int)Within.TotalMilliseconds) > 0
            ? null : $"it did not end within {Within.TotalMilliseconds:0} ms of being killed";
    }

    private async Task<string?> ByNumber()
    {
        _process.Refresh();
        if (_process.HasExited || _process.StartTime != _started)
        {
            return null;
        }

        _process.Kill();
        using var patience = new CancellationTokenSource(Within, TimeProvider.System);
        await _process.WaitForExitAsync(patience.Token);
        return null;
    }

    [StructLayout(LayoutKind.Sequential)]
    private struct Waiting
    {
        public int Descriptor;
        public short Events;
        public short Happened;
    }

    [LibraryImport("libc", EntryPoint = "syscall", SetLastError = true)]
    private static partial long Call(long number, long first, long second, long third, long fourth);

    [LibraryImport("libc", EntryPoint = "poll", SetLastError = true)]
    private static partial int Poll(ref Waiting waiting, nuint count, int milliseconds);
}
