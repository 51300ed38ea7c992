using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Runner.Sessions;
using BenchRunner.Runner.Tests.Workplaces;

namespace BenchRunner.Runner.Tests.Sessions;

/// <summary>A current clamp keeps the field of the last current: it is degaussed before each device, by the scope
/// where its dialect can, else by a person who is asked.</summary>
public sealed class ClampTests : IDisposable
{
    private const string Rest = """
        captures: { valid: 2, at-most: 4 }
        limits:
          - { quantity: eon, at: half, at-most: 1 mJ }
        """;

    private static readonly (string, string) _clamp = (
        "id_low: { scope: 3, probe: shunt, rating: 200 A,",
        "id_low: { scope: 3, probe: clamp, rating: 200 A, common-mode: 1500 V,");

    private static readonly (string, string) _noShunt = ("shunt: { resistance: 5 mOhm, inductance: 5 pH }\n", "");

    private readonly Workplace _place = new();
    private readonly RecordingSink _heard = new();

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_scope_that_can_degausses_and_nobody_is_asked()
    {
        Bench bench = _place.Bench(_clamp, _noShunt);
        var person = new Person("A. Person");

        await Run(_place.Request(_place.Sequence(Rest), bench), person);

        Assert.Empty(Assert.Single(person.Asked).Clamps);
        Assert.Equal(1, _place.Ask<int>("select count(*) from events where kind = 'degaussed'"));
        Assert.Equal(0, _place.Ask<int>("select count(*) from events where kind like 'degauss-%'"));
    }

    [Theory]
    [InlineData(true, "degauss-asked", Severity.Information)]
    [InlineData(false, "degauss-not-asked", Severity.Warning)]
    public async Task Where_the_scope_cannot_a_person_is_asked_and_the_evidence_says_whether_one_was(
        bool isAsked, string kind, Severity severity)
    {
        Bench bench = _place.Bench(_clamp, _noShunt);
        RunRequest request = _place.Request(_place.Sequence(Rest), bench) with
        {
            Dialects = _place.DialectsWithout(bench, "degauss"),
        };
        var person = new Person("A. Person") { CanAsk = isAsked };

        await Run(request, person);

        Assert.Equal(["id_low"], Assert.Single(person.Asked).Clamps);
        BenchEvent said = Assert.Single(_heard.Events, happened => happened.Kind == kind);
        Assert.Equal(severity, said.Severity);
        Assert.Contains("clamp of id_low", said.Message, StringComparison.Ordinal);
        Assert.Equal(1, _place.Ask<int>("select count(*) from events where kind like 'degauss%'"));
    }

    [Fact]
    public async Task A_bench_without_a_clamp_asks_for_nothing()
    {
        Bench bench = _place.Bench();
        RunRequest request = _place.Request(_place.Sequence(Rest), bench) with
        {
            Dialects = _place.DialectsWithout(bench, "degauss"),
        };
        var person = new Person("A. Person");

        await Run(request, person);

        Assert.Empty(Assert.Single(person.Asked).Clamps);
        Assert.Equal(0, _place.Ask<int>("select count(*) from events where kind like 'degauss%'"));
    }

    private async Task Run(RunRequest request, Person person)
    {
        RunSummary summary = await new RunSession(request, _heard, person, TimeProvider.System)
        {
            Guardian = LivingGuardian.Start,
        }
            .Run(new Serials(Workplace.Device), Cancel);
        Assert.Equal(Outcome.Accepted, Assert.Single(summary.Devices).Decision.Outcome);
    }
}
