using System.Collections.Immutable;
using BenchRunner.Safety.Supervision;
using static BenchRunner.Safety.Supervision.SupervisorEvent;
using static BenchRunner.Safety.Supervision.SupervisorState;

namespace BenchRunner.Safety.Tests.Exploration;

/// <summary>What must hold in every world that any interleaving reaches; and for each, that the exploration would find it
/// broken: a table with one line changed breaks it.</summary>
public sealed class InvariantTests
{
    private static readonly Lazy<Explorer> _explored = new(() => Explorer.Explore(SupervisorTable.Standard));

    [Fact]
    public void The_exploration_reaches_every_state()
    {
        Assert.Equal(Enum.GetValues<SupervisorState>(), _explored.Value.Worlds.Select(w => w.State).Distinct().Order());
        Assert.Contains(_explored.Value.Moves, move => move.Energises);
        Assert.Contains(_explored.Value.Moves, move => move.ReplyLost);
        Assert.Contains(
            _explored.Value.Worlds, w => w.Guardian == GuardianLife.Acted && w.Runner == RunnerLife.Ended);
    }

    /// <summary>Left over are lines that answer what an ended run no longer hears, and a rise that no poll calls one while
    /// the bank discharges.</summary>
    [Fact]
    public void The_exploration_uses_every_line_of_the_table() => Assert.Empty(
        SupervisorTable.Standard.Rows
            .Where(row => row.From != Ended && (row.From, row.On) != (Tripping, Risen))
            .Select(row => (row.From, row.On))
            .Except(_explored.Value.Used));

    [Fact]
    public void Nothing_is_energised_without_a_closed_interlock() => Holds(
        NothingEnergisedWith(w => w.LoopSeen),
        Broken(row => row.On switch
        {
            LoopOpen => row with { To = row.From, Acts = SupervisorActs.None },
            Energising => row with { Needs = row.Needs & ~SupervisorFacts.LoopClosed },
            _ => row,
        }));

    [Fact]
    public void Nothing_is_energised_without_a_living_guardian() => Holds(
        NothingEnergisedWith(w => w.Guardian == GuardianLife.Alive),
        Broken(Biased, Energising, row => row with { Needs = row.Needs & ~SupervisorFacts.GuardianAlive }));

    [Fact]
    public void Nothing_is_energised_without_a_valid_permit() => Holds(
        e => e.Moves.Where(move => (move.Energises || (move.What == "Energising" && move.To.State == Energised
                && move.From.State != Energised))
            && !(move.From.Permit == PermitLife.Live && SupervisorTable.HasPermit(move.From.State))),
        Broken(Idle, Energising, _ => new Transition(
            Idle, Energising, Energised, SupervisorFacts.None, SupervisorActs.None)));

    [Fact]
    public void Nothing_is_energised_outside_the_envelope() => Holds(
        NothingEnergisedWith(w => w.Envelope),
        Broken(row => row with { Needs = row.Needs & ~SupervisorFacts.EnvelopeKnown }));

    [Fact]
    public void Nothing_is_energised_before_the_off_bias_was_verified() => Holds(
        e => e.Moves.Where(move => move.Energises && move.From.State is not (Biased or Energised)),
        Broken(Granted, Energising, _ => new Transition(
            Granted, Energising, Energised, SupervisorFacts.Energise, SupervisorActs.None)));

    [Fact]
    public void A_trip_latches() => Holds(
        e => e.Moves.Where(move =>
            SupervisorTable.IsTrip(move.From.State) && move.From.Runner != RunnerLife.Ended
                && !(SupervisorTable.IsTrip(move.To.State) || move.To.State == Ended)),
        Broken(TrippedDown, PermitAsked, _ => new Transition(
            TrippedDown, PermitAsked, Granted, SupervisorFacts.None, SupervisorActs.Issue)));

    [Fact]
    public void A_trip_leaves_its_latch() => Holds(
        e => e.Moves.Where(move => SupervisorTable.IsTrip(move.To.State) && move.To.Runner == RunnerLife.Running
            && !move.To.Latch),
        Broken(Energised, Doubt, row => row with { Acts = row.Acts & ~SupervisorActs.Latch }),
        Broken(Discharging, NotProved, row => row with { Acts = row.Acts & ~SupervisorActs.Latch }));

    [Fact]
    public void No_sound_heartbeat_is_sent_between_a_trip_and_the_proof() => Holds(
        e => e.Moves.Where(move => move.Beats && move.From.State is Tripping or TrippedUnproved),
        Broken(Tripping, Sound, row => row with { Acts = SupervisorActs.Beat }),
        Broken(TrippedUnproved, LoopOpen, row => row with { Acts = SupervisorActs.Beat }));

    [Fact]
    public void No_permit_lives_after_a_trip() => Holds(
        e => e.Worlds.Where(w => SupervisorTable.IsTrip(w.State) && w.Permit == PermitLife.Live)
            .Select(w => new Move("it lives", w, w)),
        Broken(Energised, Doubt, row => row with { Acts = row.Acts & ~SupervisorActs.Revoke }),
        Broken(Tripping, PermitAsked, row => row with { Acts = SupervisorActs.Issue }));

    [Fact]
    public void Every_state_has_a_way_to_the_safe_state() => Holds(
        e => e.Without(w => !w.BankUp && !w.SupplyOn)
            .Select(w => new Move("no way down", w, w))
            .Concat(e.Moves.Where(move =>
                move.What == nameof(StopAsked) && (SupervisorTable.HasPermit(move.From.State) || move.From.SupplyOn)
                    && move.From.State != Ended
                    && (move.To.SupplyOn || move.To.Permit == PermitLife.Live))),
        Broken(Energised, StopAsked, row => row with { To = Energised, Acts = SupervisorActs.None }));

    [Fact]
    public void No_energising_operation_is_ever_retried() => Holds(
        e => e.Moves.Where(move => move.ReplyLost
            && (!SupervisorTable.IsTrip(move.To.State) || move.To.Permit == PermitLife.Live || move.To.SupplyOn)),
        Broken(Energised, ReplyLost, row => row with { To = Energised, Acts = SupervisorActs.None }));

    [Fact]
    public void A_stopped_runner_cannot_act_after_the_guardian_has() => Holds(
        e => e.Worlds.Where(w => w.Guardian == GuardianLife.Acted && w.Runner != RunnerLife.Ended)
            .Select(w => new Move("it may resume", w, w)),
        new SupervisorTable(SupervisorTable.Standard.Rows, [GuardianStep.MakeSafe, GuardianStep.MakeSafe]));

    [Fact]
    public void The_guardian_makes_safe_nothing_that_a_runner_may_still_charge() => Holds(
        e => e.Worlds.Where(w => w.Guardian == GuardianLife.Acting && w.Runner != RunnerLife.Ended)
            .Select(w => new Move("it may fire between", w, w)),
        new SupervisorTable(SupervisorTable.Standard.Rows, [GuardianStep.MakeSafe, GuardianStep.EndRunner]));

    [Fact]
    public void No_option_or_request_clears_a_latch() => Holds(
        e => e.Moves.Where(move =>
            (move.From.Latch && !move.To.Latch && move.What != "a person clears the latch")
            || (move.To.Latch && move.To.Runner == RunnerLife.Running
                && (SupervisorTable.HasPermit(move.To.State) || move.To.State == Idle))),
        Broken(Unwatched, WatchBegins, row => row with { Needs = SupervisorFacts.None }));

    private static Func<Explorer, IEnumerable<Move>> NothingEnergisedWith(Func<World, bool> isSo) => e => e.Moves.Where(
        move => move.Energises && !isSo(move.From));

    /// <summary>Holds on the table that holds, and is broken on each of the others.</summary>
    private static void Holds(Func<Explorer, IEnumerable<Move>> violations, params SupervisorTable[] broken)
    {
        Assert.Empty(violations(_explored.Value).Take(3));
        Assert.NotEmpty(broken);
        foreach (SupervisorTable table in broken)
        {
            Assert.NotEmpty(violations(Explorer.Explore(table)).Take(1));
        }
    }

    /// <summary>The table with one line changed, or added where there is none.</summary>
    private static SupervisorTable Broken(SupervisorState from, SupervisorEvent on, Func<Transition, Transition> change)
    {
        ImmutableArray<Transition> rows = SupervisorTable.Standard.Rows;
        Transition? row = rows.FirstOrDefault(r => r.From == from && r.On == on);
        Transition changed = change(row ?? new Transition(from, on, from, SupervisorFacts.None, SupervisorActs.None));
        return new SupervisorTable(
            row is null ? rows.Add(changed) : rows.Replace(row, changed), SupervisorTable.Standard.Guardian);
    }

    /// <summary>The table with every line changed.</summary>
    private static SupervisorTable Broken(Func<Transition, Transition> change) => new(
        [.. SupervisorTable.Standard.Rows.Select(change)], SupervisorTable.Standard.Guardian);
}
