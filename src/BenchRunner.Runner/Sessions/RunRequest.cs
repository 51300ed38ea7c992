using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Plans;

namespace BenchRunner.Runner.Sessions;

/// <summary>What a person asks of a run.</summary>
public sealed record RunRequest
{
    /// <summary>The plan; nothing refuses it.</summary>
    public required Plan Plan { get; init; }

    /// <summary>Name to dialect.</summary>
    public required IReadOnlyDictionary<string, DialectFile> Dialects { get; init; }

    /// <summary>Path of the evidence.</summary>
    public required string EvidencePath { get; init; }

    /// <summary>Lot of the devices; null: none.</summary>
    public string? Lot { get; init; }

    /// <summary>Who operates the bench; null: not stated.</summary>
    public string? Operator { get; init; }

    /// <summary>Serial of the companion; null: none.</summary>
    public string? Companion { get; init; }

    /// <summary>Why a device that was decided in its lot is measured again; null: it was not.</summary>
    public string? Again { get; init; }
}
