using BenchRunner.Safety.Supervision;
using static BenchRunner.Safety.Supervision.SupervisorEvent;

namespace BenchRunner.Safety.Tests.Exploration;

/// <summary>Tries every interleaving of what may happen, to a fixed point.</summary>
/// <remarks>
/// The runner may ask for anything at any time, whatever it was answered; the enclosure may open and close, the guardian
/// die or act, the runner be stopped, resume or die, the permit run out, somebody else charge the bank, at any time.
/// </remarks>
internal sealed class Explorer
{
    private readonly SupervisorTable _table;
    private readonly Dictionary<World, List<Move>> _from = [];
    private readonly HashSet<(SupervisorState, SupervisorEvent)> _used = [];

    private Explorer(SupervisorTable table) => _table = table;

    /// <summary>Every world that can be reached.</summary>
    public IReadOnlyCollection<World> Worlds => _from.Keys;

    /// <summary>Every move that can be made.</summary>
    public IEnumerable<Move> Moves => _from.Values.SelectMany(moves => moves);

    /// <summary>Which lines of the table some move has used.</summary>
    public IReadOnlySet<(SupervisorState From, SupervisorEvent On)> Used => _used;

    public static Explorer Explore(SupervisorTable table)
    {
        var explorer = new Explorer(table);
        var open = new Queue<World>([World.Start(envelope: true), World.Start(envelope: false)]);
        while (open.TryDequeue(out World? world))
        {
            if (explorer._from.ContainsKey(world))
            {
                continue;
            }

            List<Move> moves = [.. explorer.Around(world), .. explorer.ByRunner(world)];
            explorer._from[world] = moves;
            foreach (Move move in moves)
            {
                open.Enqueue(move.To);
            }
        }

        return explorer;
    }

    /// <summary>The worlds from which no way leads to one that is wanted.</summary>
    public IEnumerable<World> Without(Func<World, bool> wanted)
    {
        ILookup<World, World> back = Moves.ToLookup(move => move.To, move => move.From);
        HashSet<World> good = [];
        var open = new Stack<World>(Worlds.Where(wanted));
        while (open.TryPop(out World? world))
        {
            if (good.Add(world))
            {
                foreach (World before in back[world])
                {
                    open.Push(before);
                }
            }
        }

        return Worlds.Where(world => !good.Contains(world));
    }

    /// <summary>What happens around the runner.</summary>
    private IEnumerable<Move> Around(World w)
    {
        yield return new Move("the enclosure opens or closes", w, w with { Loop = !w.Loop });
        if (w.Permit == PermitLife.Live)
        {
            yield return new Move("the permit runs out", w, w with { Permit = PermitLife.Dead });
        }

        if (w.Guardian == GuardianLife.Alive)
        {
            yield return new Move("the guardian dies", w, w with { Guardian = GuardianLife.Dead });
            if (w.State != SupervisorState.Ended || w.BankUp)
            {
                // Silence of a runner that is stopped, dead or slow: what it does is done in the table's order.
                World acting = Guard(w, _table.Guardian[0]);
                yield return new Move("the guardian begins to act", w, acting with { Guardian = GuardianLife.Acting });
            }
        }

        if (w.Guardian == GuardianLife.Acting)
        {
            World acted = Guard(w, _table.Guardian[1]);
            yield return new Move("the guardian ends acting", w, acted with { Guardian = GuardianLife.Acted });
        }

        if (w.Runner != RunnerLife.Ended)
        {
            yield return new Move("the runner is killed", w, w with { Runner = RunnerLife.Ended });
            yield return new Move(
                "the runner is stopped or resumes", w,
                w with { Runner = w.Runner == RunnerLife.Stopped ? RunnerLife.Running : RunnerLife.Stopped });
        }
        else
        {
            yield return new Move(
                "the interlock's watchdog acts", w, w with { SupplyOn = false, BankUp = false });
            World next = World.Start(w.Envelope) with
            {
                Loop = w.Loop,
                LoopSeen = false,
                Latch = w.Latch,
                SupplyOn = w.SupplyOn,
                BankUp = w.BankUp,
            };
            yield return new Move("another run begins", w, next);
            if (w.Latch)
            {
                yield return new Move("a person clears the latch", w, w with { Latch = false });
            }
        }

        if (!w.BankUp && !SupervisorTable.HasPermit(w.State))
        {
            yield return new Move("somebody else charges the bank", w, w with { BankUp = true });
        }
    }

    private static World Guard(World w, GuardianStep step) => step == GuardianStep.EndRunner
        ? w with { Runner = RunnerLife.Ended } : w with { SupplyOn = false, BankUp = false };

    /// <summary>What the runner's process may do; a stopped or dead one does nothing.</summary>
    private IEnumerable<Move> ByRunner(World w)
    {
        if (w.Runner != RunnerLife.Running)
        {
            yield break;
        }

        yield return Poll(w);
        foreach (SupervisorEvent what in (SupervisorEvent[])
            [BiasVerified, StopAsked, Doubt, Overdue, Ends, PermitAsked])
        {
            // A permit is asked for after a poll, but not at one stroke with it: anything may come in between.
            yield return new Move(what.ToString(), w, Take(w, what).World);
        }

        if (w.Guardian != GuardianLife.Alive)
        {
            yield return new Move("GuardianLost", w, Take(w, GuardianLost).World);
        }

        if (w.State is SupervisorState.Discharging or SupervisorState.Tripping or SupervisorState.Unwatched)
        {
            if (!w.SupplyOn)
            {
                yield return new Move("ProvedDown", w, Take(w with { BankUp = false }, ProvedDown).World);
            }

            yield return new Move("NotProved", w, Take(w, NotProved).World);
        }

        yield return Energise(w, isLost: false);
        yield return Energise(w, isLost: true);
    }

    private Move Poll(World w)
    {
        World seen = w with { LoopSeen = w.Loop };
        bool risen = w.BankUp && !SupervisorTable.HasPermit(w.State)
            && w.State is not (SupervisorState.Discharging or SupervisorState.Tripping);
        SupervisorEvent what = risen ? Risen : w.Loop ? Sound : LoopOpen;
        bool beats = _table.Step(w.State, what, SupervisorFacts.None).Acts.HasFlag(SupervisorActs.Beat);
        World polled = Take(seen, what).World;
        if (polled.State == SupervisorState.Unwatched && what == Sound)
        {
            polled = Take(polled, WatchBegins).World;
        }

        return new Move($"poll finds {what}", w, polled) { Beats = beats };
    }

    /// <summary>The write happens under the permit's lock: it is live, or nothing is written.</summary>
    private Move Energise(World w, bool isLost)
    {
        (World after, bool isAllowed) = Take(w, Energising);
        bool writes = isAllowed && w.Permit == PermitLife.Live;
        if (writes)
        {
            after = after with { SupplyOn = true, BankUp = true };
        }

        if (isLost)
        {
            after = Take(after, ReplyLost).World;
        }

        return new Move(isLost ? "Energising, its reply lost" : "Energising", w, after)
        {
            Energises = writes,
            ReplyLost = writes && isLost,
        };
    }

    private (World World, bool IsAllowed) Take(World w, SupervisorEvent what)
    {
        SupervisorFacts facts = (w.LoopSeen ? SupervisorFacts.LoopClosed : SupervisorFacts.None)
            | (w.Guardian == GuardianLife.Alive ? SupervisorFacts.GuardianAlive : SupervisorFacts.None)
            | (w.Envelope ? SupervisorFacts.EnvelopeKnown : SupervisorFacts.None)
            | (w.Permit == PermitLife.Live ? SupervisorFacts.PermitLive : SupervisorFacts.None)
            | (w.Latch ? SupervisorFacts.None : SupervisorFacts.NoLatch);
        SupervisorStep step = _table.Step(w.State, what, facts);
        if (step.IsAllowed)
        {
            _used.Add((w.State, what));
        }

        PermitLife permit = step.Acts.HasFlag(SupervisorActs.Issue) ? PermitLife.Live
            : step.Acts.HasFlag(SupervisorActs.Revoke) ? PermitLife.None : w.Permit;
        bool isSafe = step.Acts.HasFlag(SupervisorActs.MakeSafe);
        return (
            w with
            {
                State = step.To,
                Permit = permit,
                Latch = w.Latch || step.Acts.HasFlag(SupervisorActs.Latch),
                SupplyOn = w.SupplyOn && !isSafe,
                Runner = step.To == SupervisorState.Ended ? RunnerLife.Ended : w.Runner,
            },
            step.IsAllowed);
    }
}
