using BenchRunner.Acceptance.Files;
using BenchRunner.Files;

namespace BenchRunner.Plots;

/// <summary>The file that <c>--plot</c> names: whole or not there, an older picture is replaced.</summary>
internal static class PlotFile
{
    /// <summary>Checks the name before anything is read.</summary>
    /// <param name="path">The file; null: no picture is wanted.</param>
    /// <param name="inputs">The waveform files.</param>
    /// <exception cref="InputException">It cannot be a picture's, or one picture would have to show several
    /// waveforms.</exception>
    public static void Check(string? path, IReadOnlyList<string> inputs)
    {
        if (path is null)
        {
            return;
        }

        if (!path.EndsWith(".svg", StringComparison.OrdinalIgnoreCase))
        {
            throw new InputException(
                $"--plot: '{path}'; expected a name that ends in .svg, so that no other file is replaced; rename it");
        }

        if (inputs.Count > 1)
        {
            throw new InputException(
                $"--plot: {inputs.Count} waveforms and one picture; expected one waveform; call it once for each");
        }

        if (inputs.Any(input => Path.GetFullPath(input) == Path.GetFullPath(path)))
        {
            throw new InputException($"--plot: '{path}' is the waveform itself; name another file");
        }

        if (Directory.Exists(path))
        {
            throw new InputException($"--plot: '{path}' is a directory; name a file");
        }

        if (OwnFile.LinkTarget(path) is { } target)
        {
            throw new InputException(
                $"--plot: '{path}' is a symbolic link to {target}; expected a file or nothing there; name another file");
        }

        if (!Directory.Exists(Path.GetDirectoryName(Path.GetFullPath(path))))
        {
            throw new InputException($"--plot: the folder of '{path}' does not exist; make it or name another file");
        }
    }

    /// <summary>Draws the one waveform.</summary>
    /// <exception cref="InputException">There are several, or the file cannot be written.</exception>
    public static void Write(string path, IReadOnlyList<AnalysedFile> analysed)
    {
        if (analysed.Count != 1)
        {
            throw new InputException(
                $"--plot: the capture is held at several operating points, and one picture shows one; choose by "
                    + $"--operating-point: {string.Join(", ", analysed.Select(one => one.Capture?.OperatingPoint))}");
        }

        string whole = Path.GetFullPath(path);
        string begun = Path.Combine(Path.GetDirectoryName(whole) ?? ".", $".{Guid.NewGuid():N}.svg.tmp");
        try
        {
            using (FileStream stream = new(begun, FileMode.CreateNew, FileAccess.Write))
            {
                WaveformPlot.Write(stream, analysed[0]);
            }

            File.Move(begun, whole, overwrite: true);
        }
        catch (Exception error) when (error is IOException or UnauthorizedAccessException)
        {
            throw new InputException(
                $"--plot: '{path}' cannot be written ({error.Message.TrimEnd('.')}); name a file in a folder that can "
                    + "be written");
        }
        finally
        {
            if (File.Exists(begun))
            {
                File.Delete(begun);
            }
        }
    }
}
