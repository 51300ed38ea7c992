using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Evidence.Schemas;

/// <summary>What format 2 adds to format 1: leakage holds, the scope's counts of a capture, and entries with a seal of
/// their own for what comes after a run. Nothing of format 1 is altered, so that its runs keep their seals.</summary>
/// <remarks>An entry names its seal by origin and ordinal, since the seals' table has no column for entries.</remarks>
internal static class Additions
{
    /// <summary>The points that are never counted, as a list of SQL.</summary>
    public const string Uncounted =
        $"('{UncountedPoints.Zero}', '{UncountedPoints.ProvingBefore}', '{UncountedPoints.ProvingAfter}')";

    private const string Tables = """
        create table hold (
          run integer not null references run (id),
          ordinal integer not null,
          operating_point integer not null references word (id),
          at text not null,
          bus_voltage real not null,
          supply_current real,
          first_voltage real not null,
          last_voltage real not null,
          seconds real not null,
          leakage real not null,
          bound real,
          conforms integer not null check (conforms in (0, 1)),
          primary key (run, ordinal)
        ) strict, without rowid;

        create table acquisition (
          capture integer primary key references capture (id),
          count_before integer,
          count_after integer
        ) strict;

        create table entry (
          id integer primary key,
          uid text not null unique,
          origin integer not null references origin (id),
          ordinal integer not null check (ordinal >= 1),
          kind text not null,
          at text not null,
          author text not null,
          unique (origin, ordinal)
        ) strict;

        create table note (
          entry integer primary key references entry (id),
          device text not null,
          lot integer not null references word (id),
          kind text not null check (kind in ('release', 'scrap', 'return', 'concession')),
          because text not null
        ) strict;

        create table placement (
          entry integer primary key references entry (id),
          run integer not null references run (id),
          place text not null
        ) strict;

        """;

    private const string Indexes = """
        create index note_by_device on note (device, lot);
        create index note_by_lot on note (lot);
        create index placement_by_run on placement (run);
        create index run_by_companion on run (companion) where companion is not null;

        """;

    private const string Views = $"""
        create view leakage_holds as
        select r.uid as run, r.device, lot.text as lot, point.text as operating_point, h.at, h.bus_voltage,
          h.supply_current, h.first_voltage, h.last_voltage, h.seconds, h.leakage, h.bound, h.conforms, r.simulated
        from hold h
        join run r on r.id = h.run
        left join word lot on lot.id = r.lot
        join word point on point.id = h.operating_point;

        create view acquisitions as
        select r.uid as run, r.device, point.text as operating_point, c.number as capture, a.count_before, a.count_after,
          r.simulated
        from acquisition a
        join capture c on c.id = a.capture
        join run r on r.id = c.run
        join word point on point.id = c.operating_point;

        create view notes as
        select e.at, n.device, lot.text as lot, n.kind, e.author, n.because, e.uid as entry
        from note n
        join entry e on e.id = n.entry
        join word lot on lot.id = n.lot;

        create view placements as
        select e.at, r.uid as run, r.device, lot.text as lot, p.place, e.author, e.uid as entry
        from placement p
        join entry e on e.id = p.entry
        join run r on r.id = p.run
        left join word lot on lot.id = r.lot;

        create view companions as
        select r.companion, count(distinct r.id) as runs,
          coalesce(sum(point.text not in {Uncounted}), 0) as captures_taken,
          coalesce(sum(point.text in ('{UncountedPoints.ProvingBefore}', '{UncountedPoints.ProvingAfter}')), 0)
            as proving_captures,
          max(r.started_at) as last_started_at
        from run r
        left join capture c on c.run = r.id
        left join word point on point.id = c.operating_point
        where r.companion is not null
        group by r.companion;
        """;

    private const string EntryIsSealed =
        "exists (select 1 from entry e join seal s on s.origin = e.origin and s.ordinal = e.ordinal "
        + "where e.id = new.entry)";

    /// <summary>Each table that is added, with its keys: no row of it is ever changed, deleted or replaced.</summary>
    public static IReadOnlyList<(string Table, string[][] Keys)> AppendOnly { get; } =
    [
        ("hold", [["run", "ordinal"]]),
        ("acquisition", [["capture"]]),
        ("entry", [["id"], ["uid"], ["origin", "ordinal"]]),
        ("note", [["entry"]]),
        ("placement", [["entry"]]),
    ];

    /// <summary>Statements that make of a file of format 1 one of format 2.</summary>
    public static string Sql { get; } = Tables + Indexes + Triggers.Keeping(AppendOnly)
        + Triggers.Ending("hold", "exists (select 1 from seal where kind = 'run' and run = new.run)", "run")
        + Triggers.Ending("acquisition", Triggers.CaptureIsSealed, "run")
        + Triggers.Ending(
            "entry", "exists (select 1 from seal where origin = new.origin and ordinal = new.ordinal)", "entry")
        + Triggers.Ending("note", EntryIsSealed, "entry")
        + Triggers.Ending("placement", EntryIsSealed, "entry")
        + Views;

    /// <summary>Statements by which a reader sees a file of format 1 as one of format 2 that has nothing of what was
    /// added; they alter its connection, not the file.</summary>
    public static string OfReader { get; } = (Tables + Views)
        .Replace("create table ", "create temp table ", StringComparison.Ordinal)
        .Replace("create view ", "create temp view ", StringComparison.Ordinal);
}
