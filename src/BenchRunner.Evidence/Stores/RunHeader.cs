using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Evidence.Stores;

/// <summary>What is known of a run before it begins.</summary>
public sealed record RunHeader
{
    /// <summary>Serial of the device.</summary>
    public required string Device { get; init; }

    /// <summary>Lot of the device; null: none, and the run is attempt 1 and current by itself.</summary>
    public string? Lot { get; init; }

    /// <summary>The sequence; its exact bytes are stored.</summary>
    public required Sequence Sequence { get; init; }

    /// <summary>Name of the bench.</summary>
    public required string Bench { get; init; }

    /// <summary>Bench, dialects and calibration file, whose exact bytes are stored; the sequence is not among
    /// them.</summary>
    public IReadOnlyList<SourceFile> Files { get; init; } = [];

    /// <summary>Who operates the bench; null: not stated.</summary>
    public string? Operator { get; init; }

    /// <summary>Who armed a bench without a terminal; null: confirmed at the terminal, or nothing to confirm.</summary>
    public string? ArmedBy { get; init; }

    /// <summary>Serial of the companion; null: none.</summary>
    public string? Companion { get; init; }

    /// <summary>Whether the bench is simulated. Simulated and measured runs never share a file.</summary>
    public required bool Simulated { get; init; }

    /// <summary>Why a device that was decided in its lot is measured again; null: it was not.</summary>
    public string? Again { get; init; }

    /// <summary>Identity of the algorithms that form quantities and decisions.</summary>
    public required string Algorithm { get; init; }

    /// <summary>The platform it runs on, e.g. <c>linux-x64 .NET 10.0.0</c>.</summary>
    public required string Platform { get; init; }
}
