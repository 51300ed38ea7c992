using System.Globalization;
using FakeBench.Faults;
using FakeBench.Population;

namespace BenchRunner.Soak.Mixes;

/// <summary>What one trial is made of, all of it out of its seed.</summary>
/// <param name="Seed">The seed.</param>
internal sealed record Mix(ulong Seed)
{
    private const int MostFaults = 4;
    private const double NamedShare = 0.3, InterruptedShare = 0.06, DeclinedShare = 0.01, SteppedShare = 0.1;

    /// <summary>Serial of the device in the socket.</summary>
    public required string Device { get; init; }

    /// <summary>Operating points: <c>half</c>, <c>rated</c>, or both.</summary>
    public required IReadOnlyList<string> Points { get; init; }

    /// <summary>Valid captures wanted a point, and the most that are taken.</summary>
    public required (int Valid, int AtMost) Captures { get; init; }

    /// <summary>What goes wrong.</summary>
    public required IReadOnlyList<Fault> Faults { get; init; }

    /// <summary>How long a message takes on its way, s, in the mean.</summary>
    public required double Latency { get; init; }

    /// <summary>When the operator interrupts, s; null: never.</summary>
    public required double? Interrupted { get; init; }

    /// <summary>Whether the operator does not confirm.</summary>
    public required bool Declined { get; init; }

    /// <summary>When somebody sets the wall clock, s, and by how much, s; null: nobody does.</summary>
    public required (double At, double By)? Stepped { get; init; }

    /// <summary>The mix of a seed.</summary>
    public static Mix Of(ulong seed)
    {
        var draw = new SplitMix(SplitMix.Key("mix", (long)seed));
        double Uniform(double from, double to) => from + ((to - from) * draw.NextUniform());
        int Whole(int from, int to) => from + (int)(draw.Next() % (ulong)(to - from + 1));
        T Of<T>(IReadOnlyList<T> all) => all[Whole(0, all.Count - 1)];
        int valid = Whole(2, 3);
        string device = draw.NextUniform() < NamedShare
            ? Of(DevicePopulation.Named).Serial
            : string.Create(CultureInfo.InvariantCulture, $"W1200-{Whole(1, 40):0000}");
        IReadOnlyList<string> points = Of<IReadOnlyList<string>>([["half"], ["rated"], ["half", "rated"]]);
        var faults = new List<Fault>();
        for (int left = Whole(0, MostFaults); left > 0; left--)
        {
            FaultKind kind = Of(FaultCatalogue.All);
            string? role = kind.Role is null ? null
                : Of<string>([kind.Role, "supply", "pulser", "scope", "voltmeter", "interlock"]);
            Moment begins = Whole(1, 5) switch
            {
                1 => new Moment(MomentKind.Fire, Whole(1, 6)),
                2 => new Moment(MomentKind.Volts, Math.Round(Uniform(1, 600))),
                3 => new Moment(MomentKind.Seconds, Math.Round(Uniform(0, 8), 2)),
                4 => new Moment(MomentKind.Block, Whole(1, 40)),
                _ => kind.Begins,
            };
            if (kind.Name == FaultCatalogue.ProbesSwapped)
            {
                // Nobody swaps probes in a closed enclosure.
                begins = Moment.Start;
            }

            faults.Add(new Fault(role is null ? kind.Name : LinkFault.Of(role, kind.Name), begins));
        }

        return new Mix(seed)
        {
            Device = device,
            Points = points,
            Captures = (valid, valid + Whole(1, 3)),
            Faults = faults,
            Latency = Math.Exp(Uniform(Math.Log(50e-6), Math.Log(2e-3))),
            Interrupted = draw.NextUniform() < InterruptedShare ? Uniform(0, 8) : null,
            Declined = draw.NextUniform() < DeclinedShare,
            Stepped = draw.NextUniform() < SteppedShare ? (Uniform(0, 8), Uniform(-86_400, 86_400)) : null,
        };
    }

    /// <summary>The same mix on a sound device, uninterrupted, under faults that were asked for.</summary>
    public Mix Under(IReadOnlyList<Fault> faults) => this with
    {
        Device = "W1200-0001",
        Points = ["half", "rated"],
        Captures = (3, 8),
        Faults = faults,
        Interrupted = null,
        Declined = false,
        Stepped = null,
    };

    /// <inheritdoc/>
    public override string ToString()
    {
        IEnumerable<string> faults = Faults.Select(fault => $"{fault.Name}@{fault.Begins}");
        string interrupted = Interrupted is { } at ? FormattableString.Invariant($", interrupted at {at:0.00} s") : "";
        string stepped = Stepped is { } step
            ? FormattableString.Invariant($", clock set by {step.By:0} s at {step.At:0.00} s") : "";
        return $"seed {Seed}: {Device}, {string.Join('+', Points)}, {Captures.Valid} of {Captures.AtMost}, "
            + $"faults [{string.Join(' ', faults)}]{interrupted}{(Declined ? ", declined" : "")}{stepped}";
    }
}
