using System.Diagnostics;
using System.Runtime.InteropServices;
using System.Text;

namespace EndToEnd;

/// <summary>A process that runs; its output is read while it does.</summary>
internal sealed partial class Started : IDisposable
{
    private readonly Process _process;
    private readonly TimeSpan _patience;
    private readonly StringBuilder _output = new();
    private readonly StringBuilder _error = new();
    private TaskCompletionSource _more = new(TaskCreationOptions.RunContinuationsAsynchronously);
    private int _at;
    private readonly List<(Func<string, bool> Is, TaskCompletionSource<string> Seen)> _awaited = [];

    public Started(Process process, TimeSpan patience)
    {
        _process = process;
        _patience = patience;
        process.OutputDataReceived += (_, line) => Take(_output, line.Data);
        process.ErrorDataReceived += (_, line) => Take(_error, line.Data);
        process.BeginOutputReadLine();
        process.BeginErrorReadLine();
    }

    /// <summary>Number of the process.</summary>
    public int Id => _process.Id;

    /// <summary>Whether the process has gone.</summary>
    public bool HasEnded => _process.HasExited;

    public StreamWriter Input => _process.StandardInput;

    /// <summary>Waits for a line of output that is as wanted, past or to come.</summary>
    public async Task<string> Line(Func<string, bool> isWanted)
    {
        TaskCompletionSource<string> seen = new(TaskCreationOptions.RunContinuationsAsynchronously);
        lock (_awaited)
        {
            foreach (string line in _output.ToString().Split('\n'))
            {
                if (isWanted(line))
                {
                    return line;
                }
            }

            _awaited.Add((isWanted, seen));
        }

        Task ended = _process.WaitForExitAsync();
        Task first = await Task.WhenAny(seen.Task, ended).WaitAsync(_patience);
        if (first == ended && !seen.Task.IsCompleted)
        {
            Assert.Fail($"the process ended before the line came: {(await End()).All}");
        }

        return await seen.Task;
    }

    /// <summary>Waits for a line of output with a text in it, after the last line that was waited for so.</summary>
    public async Task<string> Next(string text)
    {
        long began = TimeProvider.System.GetTimestamp();
        Task ended = _process.WaitForExitAsync();
        while (true)
        {
            Task more;
            lock (_awaited)
            {
                string[] lines = _output.ToString().Split('\n');
                for (; _at < lines.Length; _at++)
                {
                    if (lines[_at].Contains(text, StringComparison.Ordinal))
                    {
                        return lines[_at++];
                    }
                }

                _at = lines.Length - 1;
                more = _more.Task;
            }

            if (await Task.WhenAny(more, ended, Task.Delay(_patience, TimeProvider.System)) != more)
            {
                Assert.Fail($"'{text}' did not come: {(ended.IsCompleted ? "the process ended" : "it goes on")} after "
                    + $"{TimeProvider.System.GetElapsedTime(began)}\n{_output}");
            }
        }
    }

    /// <summary>Types at its standard input.</summary>
    public async Task Type(string text)
    {
        await Input.WriteAsync(text);
        await Input.FlushAsync();
    }

    /// <summary>Number of the guardian that this run has started.</summary>
    public int Guardian() => Directory.GetDirectories("/proc")
        .Select(Path.GetFileName)
        .Where(name => int.TryParse(name, out _))
        .Select(int.Parse!)
        .Single(number => IsGuardian(number, Id));

    /// <summary>Sends a signal, e.g. SIGINT or SIGKILL.</summary>
    public void Signal(int signal) => Assert.Equal(0, Kill(_process.Id, signal));

    /// <summary>Sends a signal; false: there is no such process any more.</summary>
    public bool TrySignal(int signal) => Kill(_process.Id, signal) == 0;

    /// <summary>Sends a signal to another process.</summary>
    public static void Send(int process, int signal) => _ = Kill(process, signal);

    /// <summary>Waits until the process has gone, whoever still holds its output.</summary>
    public async Task Exited()
    {
        using var patience = new CancellationTokenSource(_patience);
        while (!_process.HasExited)
        {
            await Task.Delay(TimeSpan.FromMilliseconds(20), TimeProvider.System, patience.Token);
        }
    }

    public async Task<Finished> End()
    {
        using var patience = new CancellationTokenSource(_patience);
        try
        {
            await _process.WaitForExitAsync(patience.Token);
        }
        catch (OperationCanceledException)
        {
            _process.Kill(entireProcessTree: true);
            lock (_awaited)
            {
                Assert.Fail($"still running after {_patience.TotalSeconds} s\n{_output}\n{_error}");
            }
        }

        lock (_awaited)
        {
            return new Finished(_process.ExitCode, _output.ToString(), _error.ToString());
        }
    }

    public void Dispose()
    {
        if (!_process.HasExited)
        {
            _process.Kill(entireProcessTree: true);
        }

        _process.Dispose();
    }

    private static bool IsGuardian(int number, int runner)
    {
        try
        {
            return File.ReadAllText($"/proc/{number}/cmdline").Contains("\0guard\0", StringComparison.Ordinal)
                && File.ReadLines($"/proc/{number}/status").Contains($"PPid:\t{runner}");
        }
        catch (IOException)
        {
            // It ended while it was looked at.
            return false;
        }
    }

    private void Take(StringBuilder to, string? line)
    {
        if (line is null)
        {
            return;
        }

        lock (_awaited)
        {
            to.Append(line).Append('\n');
            _more.SetResult();
            _more = new TaskCompletionSource(TaskCreationOptions.RunContinuationsAsynchronously);
            foreach ((Func<string, bool> isWanted, TaskCompletionSource<string> seen) in _awaited)
            {
                if (to == _output && isWanted(line))
                {
                    seen.TrySetResult(line);
                }
            }
        }
    }

    [LibraryImport("libc", EntryPoint = "kill")]
    private static partial int Kill(int process, int signal);
}
