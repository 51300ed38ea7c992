using System.Security.Cryptography;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Settings;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Files;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Files;

/// <summary>What <c>analyse</c> reads; whatever is wrong with it becomes one <see cref="InputException"/>.</summary>
internal static class AnalysisInput
{
    public static AnalysisSettings Settings(string? file, bool everyDefinition)
    {
        if (file is null)
        {
            return new AnalysisSettings { EveryDefinition = everyDefinition };
        }

        Read<AnalysisSettings> read = SettingsFile.Read(file);
        return read.Value is { } settings
            ? settings with { EveryDefinition = everyDefinition }
            : throw new InputException(string.Join(Environment.NewLine, read.Problems));
    }

    public static WaveformFileOptions Options(
        string? interval, IReadOnlyList<string> channels, string option = "--interval")
    {
        (ChannelMapping? Mapping, WaveformProblem? Problem)[] parsed = [.. channels.Select(ChannelMapping.Parse)];
        string[] wrong =
            [.. parsed.Select(one => one.Problem).OfType<WaveformProblem>().Select(problem => problem.ToString())];
        return wrong.Length == 0
            ? new WaveformFileOptions
            {
                Interval = Seconds(interval, option),
                Channels = [.. parsed.Select(one => one.Mapping!)],
            }
            : throw new InputException(string.Join(Environment.NewLine, wrong));
    }

    /// <summary>Reads a waveform file and analyses it.</summary>
    public static AnalysedFile Analyse(string file, WaveformFileOptions options, AnalysisSettings settings)
    {
        try
        {
            (Waveform waveform, string sha256) = Unchanged(file, options);
            AnalysisResult result = WaveformAnalysis.Analyse(waveform, settings);
            return new AnalysedFile(
                file, sha256, waveform, settings, result, WaveformFindings.Judge(waveform, result, settings));
        }
        catch (OutOfMemoryException)
        {
            throw new InputException(
                $"{file}: it is longer than this computer's memory holds; cut the record to the pulse train");
        }
    }

    /// <summary>Reads a waveform file, with the SHA-256 of the very bytes that were read.</summary>
    public static (Waveform Waveform, string Sha256) Unchanged(string file, WaveformFileOptions options)
    {
        if (Passing(file, options) is { } passed)
        {
            return passed;
        }

        (long Length, DateTime Written) before = State(file);
        Waveform waveform = Checked(WaveformFile.Read(file, options));
        string sha256 = Sha256(file);
        if (State(file) != before)
        {
            throw new InputException(
                $"{file}: it changed while it was read; expected a finished file; wait until it is written, or copy "
                    + "it");
        }

        return (waveform, sha256);
    }

    /// <summary>Reads what can be read only once, a pipe or standard input.</summary>
    /// <returns>Null where it is a file on disk, or cannot be opened.</returns>
    private static (Waveform Waveform, string Sha256)? Passing(string file, WaveformFileOptions options)
    {
        FileStream stream;
        try
        {
            stream = new FileStream(file, FileMode.Open, FileAccess.Read, FileShare.ReadWrite, bufferSize: 0);
        }
        catch (Exception error) when (error is IOException or UnauthorizedAccessException or ArgumentException
            or NotSupportedException)
        {
            return null;
        }

        using (stream)
        {
            if (stream.CanSeek)
            {
                return null;
            }

            using SHA256 hash = SHA256.Create();
            using CryptoStream hashed = new(stream, hash, CryptoStreamMode.Read);
            Waveform waveform = Checked(WaveformFile.Read(hashed, file, options));
            hashed.CopyTo(Stream.Null);
            return (waveform, Convert.ToHexStringLower(hash.Hash!));
        }
    }

    private static Waveform Checked(WaveformRead read) =>
        read.Waveform ?? throw new InputException(string.Join(Environment.NewLine, read.Problems));

    private static string Sha256(string file)
    {
        using FileStream stream = File.OpenRead(file);
        return Convert.ToHexStringLower(SHA256.HashData(stream));
    }

    private static (long Length, DateTime Written) State(string file)
    {
        FileInfo info = new(file);
        return info.Exists ? (info.Length, info.LastWriteTimeUtc) : default;
    }

    private static double? Seconds(string? text, string option) => text switch
    {
        null => null,
        _ when SiText.TryParse(text, out double seconds, out string unit) && unit == "s" && seconds > 0 => seconds,
        _ => throw new InputException(
            $"{option}: '{text}'; expected a time above 0 with its unit; write for instance 400 ps."),
    };
}
