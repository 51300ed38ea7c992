using BenchRunner.Signals.Files;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Files;

/// <summary>A waveform file that is compared, as it was read.</summary>
internal sealed record ComparedFile(string File, string Sha256, Waveform Waveform)
{
    /// <summary>The names of its channels.</summary>
    public string Channels => string.Join(' ', Waveform.Channels.Select(channel => channel.Name()));

    /// <summary>Reads it.</summary>
    /// <exception cref="InputException">The file is wrong.</exception>
    public static ComparedFile Read(string file, WaveformFileOptions options)
    {
        (Waveform waveform, string sha256) = AnalysisInput.Unchanged(file, options);
        return new ComparedFile(file, sha256, waveform);
    }
}
