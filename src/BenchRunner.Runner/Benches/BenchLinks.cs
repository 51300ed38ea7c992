using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Runner.Benches;

/// <summary>Where each role of a bench is reached, and how.</summary>
/// <param name="Bench">The bench.</param>
/// <param name="Dialects">Name to dialect file.</param>
/// <param name="StandIns">Links that stand in for those of the bench file (a fake bench's); null: none do.</param>
/// <param name="Opener">Opens the links.</param>
public sealed record BenchLinks(
    Bench Bench,
    IReadOnlyDictionary<string, DialectFile> Dialects,
    IReadOnlyDictionary<string, string>? StandIns,
    LinkOpener Opener)
{
    /// <summary>Clients that a role's instrument serves at once.</summary>
    public int Connections(string role) => Bench.Roles[role].Connections;

    /// <summary>What connecting to a role needs.</summary>
    /// <exception cref="BenchException">The fake bench does not offer it.</exception>
    public InstrumentConnection To(string role, SessionOptions options, IInstrumentLog log, TimeProvider time)
    {
        InstrumentSetup setup = Bench.Roles[role];
        string link = StandIns is null ? setup.Link : StandIns.GetValueOrDefault(role)
            ?? throw new BenchException($"the fake bench offers no {role}");
        return new InstrumentConnection(
            LinkAddress.Parse(link),
            Dialects[setup.Dialect].ToDialect(),
            options with { Lock = LinkLock.Of(Bench, role) },
            time,
            log)
        {
            Opener = Opener,
        };
    }
}
