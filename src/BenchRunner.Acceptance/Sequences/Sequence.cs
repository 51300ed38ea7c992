using BenchRunner.Acceptance.Files;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Acceptance.Sequences;

/// <summary>What one device goes through and what it must meet. All values SI.</summary>
public sealed record Sequence
{
    /// <summary>The word that files write for the temperature of the room.</summary>
    public const string Ambient = "ambient";

    /// <summary>Valid captures wanted where the file does not say.</summary>
    public const int UsualValidCaptures = 5;

    /// <summary>Most captures taken where the file does not say.</summary>
    public const int UsualCapturesAtMost = 20;

    /// <summary>Most attempts where the file does not say.</summary>
    public const int UsualAttempts = 2;

    /// <summary>Time at a new temperature where the file does not say, s.</summary>
    public const double UsualSoak = 120;

    /// <summary>Name, e.g. <c>wd-1200s-25 incoming</c>.</summary>
    public required string Name { get; init; }

    /// <summary>Revision, from 1.</summary>
    public required int Revision { get; init; }

    /// <summary>The part, e.g. <c>WD-1200S-25</c>.</summary>
    public required string Part { get; init; }

    /// <summary>Kind of the device.</summary>
    public required DeviceKind Kind { get; init; }

    /// <summary>Place of the device in the half bridge.</summary>
    public required DevicePosition Position { get; init; }

    /// <summary>Regular expression that a whole serial must match; null: <c>[A-Za-z0-9._-]{1,64}</c> alone.</summary>
    public string? SerialForm { get; init; }

    /// <summary>The companion's part; null where there is none.</summary>
    public string? CompanionPart { get; init; }

    /// <summary>Ratings of the device.</summary>
    public required DeviceRatings Ratings { get; init; }

    /// <summary>Transient thermal impedance by rising pulse time; the last is steady. Empty: not stated.</summary>
    public IReadOnlyList<ThermalPoint> ThermalImpedance { get; init; } = [];

    /// <summary>What the device is expected to do; the plan sizes ranges and sampling by it.</summary>
    public required ExpectedBehaviour Expected { get; init; }

    /// <summary>Highest leakage at the bus voltage, A; null: not stated.</summary>
    public double? Leakage { get; init; }

    /// <summary>The operating points as written.</summary>
    public required IReadOnlyList<OperatingPoint> OperatingPoints { get; init; }

    /// <summary>Whether the points are run as written rather than by temperature, bus voltage, current.</summary>
    public bool AsWritten { get; init; }

    /// <summary>Time for which a new temperature is held before the first capture, s.</summary>
    public double Soak { get; init; } = UsualSoak;

    /// <summary>Valid captures wanted a point.</summary>
    public int ValidCaptures { get; init; } = UsualValidCaptures;

    /// <summary>Most captures taken a point.</summary>
    public int CapturesAtMost { get; init; } = UsualCapturesAtMost;

    /// <summary>Whether captures continue until every limit is decided, up to the most allowed.</summary>
    public bool UntilDecided { get; init; }

    /// <summary>Bounds of the validity criteria.</summary>
    public ValidityBounds Validity { get; init; } = new();

    /// <summary>The limits.</summary>
    public required IReadOnlyList<Limit> Limits { get; init; }

    /// <summary>The decision rule.</summary>
    public DecisionRule Decision { get; init; } = new();

    /// <summary>Most attempts of a device in a lot.</summary>
    public int Attempts { get; init; } = UsualAttempts;

    /// <summary>Definitions asked for in place of the defaults: quantity to ID.</summary>
    public IReadOnlyDictionary<string, string> Definitions { get; init; } = new Dictionary<string, string>();

    /// <summary>Time of <c>qrr/window-T</c>, s; null where not asked for.</summary>
    public double? IntegrationTime { get; init; }

    /// <summary>Where single keys stand, by path (e.g. <c>ratings.peak-current</c>), for messages.</summary>
    public IReadOnlyDictionary<string, Place> Keys { get; init; } = new Dictionary<string, Place>();

    /// <summary>The exact bytes it was read from.</summary>
    public required SourceFile Source { get; init; }
}
