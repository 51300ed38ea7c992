using System.Collections.Immutable;
using static BenchRunner.Safety.Supervision.SupervisorActs;
using static BenchRunner.Safety.Supervision.SupervisorEvent;
using static BenchRunner.Safety.Supervision.SupervisorState;

namespace BenchRunner.Safety.Supervision;

/// <summary>The supervisor's states, events and transitions, written down once: <see cref="SafetySupervisor"/> is driven
/// by it, a test explores it with runner, guardian and enclosure around it, and DEVELOPERS.md shows it.</summary>
/// <remarks>Pure and immutable. What no line names is refused.</remarks>
/// <param name="rows">The lines; at most one for a state and an event.</param>
/// <param name="guardian">In which order the guardian acts.</param>
public sealed class SupervisorTable(ImmutableArray<Transition> rows, ImmutableArray<GuardianStep> guardian)
{
    private static readonly SupervisorState[] _all = Enum.GetValues<SupervisorState>();
    private static readonly SupervisorState[] _ofTrip = [Tripping, TrippedDown, TrippedUnproved];
    private static readonly SupervisorState[] _permitted = [Granted, Biased, Energised, Regranted];

    private readonly ImmutableDictionary<(SupervisorState, SupervisorEvent), Transition> _rows =
        rows.ToImmutableDictionary(row => (row.From, row.On));

    /// <summary>The table that holds.</summary>
    public static SupervisorTable Standard { get; } = new(
        [.. Grants(), .. Polls(), .. Trips(), .. WaysDown()], [GuardianStep.EndRunner, GuardianStep.MakeSafe]);

    /// <summary>Its lines.</summary>
    public ImmutableArray<Transition> Rows { get; } = rows;

    /// <summary>In which order the guardian acts.</summary>
    public ImmutableArray<GuardianStep> Guardian { get; } = guardian;

    /// <summary>What an event leads to.</summary>
    /// <param name="from">The state.</param>
    /// <param name="happened">The event.</param>
    /// <param name="facts">What is so at this moment.</param>
    public SupervisorStep Step(SupervisorState from, SupervisorEvent happened, SupervisorFacts facts)
    {
        if (!_rows.TryGetValue((from, happened), out Transition? row))
        {
            return new SupervisorStep(from, Refuse, SupervisorFacts.None);
        }

        SupervisorFacts missing = row.Needs & ~facts;
        return missing == SupervisorFacts.None
            ? new SupervisorStep(row.To, row.Acts, missing) : new SupervisorStep(from, Refuse, missing);
    }

    /// <summary>Whether a trip stands in a state.</summary>
    public static bool IsTrip(SupervisorState state) => _ofTrip.Contains(state);

    /// <summary>Whether a permit may be live in a state.</summary>
    public static bool HasPermit(SupervisorState state) => _permitted.Contains(state);

    private static IEnumerable<Transition> Grants() =>
    [
        new(Unwatched, WatchBegins, Idle, SupervisorFacts.NoLatch, None),
        .. From([Idle, Down, Granted, Biased], PermitAsked, Granted, Issue, SupervisorFacts.Grant),
        .. From([Energised, Regranted], PermitAsked, Regranted, Issue, SupervisorFacts.Grant),
        .. From([Granted, Biased], BiasVerified, Biased, None, SupervisorFacts.Energise),
        .. From([Energised, Regranted], BiasVerified, Energised, None, SupervisorFacts.Energise),
        .. From([Biased, Energised], Energising, Energised, None, SupervisorFacts.Energise),
    ];

    private static IEnumerable<Transition> Polls() =>
    [
        .. Stay(_permitted, Sound, Renew | Beat),
        .. Stay([Unwatched, Idle, Discharging, Down, TrippedDown], Sound, Beat),
        .. Stay([Tripping, TrippedUnproved], Sound, None),
        .. Stay([Unwatched, Idle, Down], LoopOpen, Beat),
        .. Stay([TrippedDown], LoopOpen, Beat),
        .. Stay([Tripping, TrippedUnproved], LoopOpen, None),
        .. From([.. _permitted, Discharging], LoopOpen, Tripping, Revoke | Latch | MakeSafe),
        .. From([Unwatched, Idle, Down], Risen, Tripping, Revoke | Latch | MakeSafe),
        .. From([TrippedDown], Risen, Tripping, Alarm | MakeSafe),
        .. Stay([Tripping, TrippedUnproved], Risen, None),
    ];

    private static IEnumerable<Transition> Trips()
    {
        SupervisorState[] sound = [.. _all.Except([.. _ofTrip, Ended])];
        return ((SupervisorEvent[])[Doubt, GuardianLost, Overdue, ReplyLost]).SelectMany(
            wrong => (IEnumerable<Transition>)
            [
                .. From(sound, wrong, Tripping, Revoke | Latch | MakeSafe),
                .. Stay([.. _ofTrip, Ended], wrong, None),
            ]);
    }

    private static IEnumerable<Transition> WaysDown() =>
    [
        .. From(
            [Idle, .. _permitted, Discharging, Down], StopAsked, Discharging, Revoke | MakeSafe),
        .. From(_ofTrip, StopAsked, Tripping, MakeSafe),
        .. Stay([Unwatched], StopAsked, MakeSafe),
        .. Stay([Unwatched], ProvedDown, None),
        new(Unwatched, NotProved, TrippedUnproved, SupervisorFacts.None, Latch),
        new(Discharging, ProvedDown, Down, SupervisorFacts.None, None),
        new(Tripping, ProvedDown, TrippedDown, SupervisorFacts.None, None),
        new(Discharging, NotProved, TrippedUnproved, SupervisorFacts.None, Revoke | Latch),
        new(Tripping, NotProved, TrippedUnproved, SupervisorFacts.None, None),
        .. From([Unwatched, Idle, Down, TrippedDown, TrippedUnproved, Ended], Ends, Ended, Revoke),
        .. From(_permitted, Ends, Discharging, Revoke | MakeSafe),
        .. Stay([Discharging, Tripping], Ends, MakeSafe),
    ];

    private static IEnumerable<Transition> From(
        IEnumerable<SupervisorState> from,
        SupervisorEvent on,
        SupervisorState to,
        SupervisorActs acts,
        SupervisorFacts needs = SupervisorFacts.None) => from.Select(state => new Transition(state, on, to, needs, acts));

    private static IEnumerable<Transition> Stay(
        IEnumerable<SupervisorState> states, SupervisorEvent on, SupervisorActs acts) =>
        states.Select(state => new Transition(state, on, state, SupervisorFacts.None, acts));
}
