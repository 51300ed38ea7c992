using BenchRunner.Evidence.Schemas;

namespace BenchRunner.Evidence.Queries;

/// <summary>The catalogue of named questions.</summary>
public static class NamedQueries
{
    // Values of interned texts come as parameters; the subquery is one step down an index.
    private static readonly QueryFilter MeasuredAt =
        new("at", "only this operating point", "m.operating_point = (select id from word where text = $at)");

    private static readonly QueryFilter MeasuredLot =
        new("lot", "only this lot", "m.lot = (select id from word where text = $lot)");

    private static readonly QueryFilter Quantity = new("quantity", "the quantity, e.g. qrr", Required: true);

    /// <summary>All named questions, in the order in which they are listed.</summary>
    public static IReadOnlyList<NamedQuery> All { get; } =
    [
        new(
            "device-history",
            "What became of this device, each run and scoring, newest first?",
            [new("device", "serial of the device", Required: true)],
            """
            select started_at, run, lot, attempt, scoring, current, sequence, sequence_revision, outcome,
              captures_taken, captures_valid, reason
            from device_outcomes where device = $device order by started_at desc, attempt desc, scoring desc
            """),
        new(
            "device-values",
            "What was measured of this device, by its current decisions?",
            [
                new("device", "serial of the device", Required: true),
                new("lot", "only this lot", "lot = $lot"),
                new("quantity", "only this quantity", "quantity = $quantity"),
                new("at", "only this operating point", "operating_point = $at"),
            ],
            $"""
            select run, lot, operating_point, quantity, definition, value, expanded_uncertainty, unit, lower_limit,
              upper_limit, conformity, reason
            from measurements where device = $device and current {NamedQuery.Marker}
            order by run, operating_point, quantity, definition
            """),
        new(
            "lot-yield",
            "How many devices of this lot were accepted, and how many at their first attempt?",
            [new("lot", "the lot", Required: true)],
            "select * from lot_yield where lot = $lot order by part, sequence"),
        new(
            "all-lots-yield",
            "How many devices of each lot were accepted?",
            [new("part", "only this part", "part = $part")],
            $"select * from lot_yield where true {NamedQuery.Marker} order by lot, part, sequence"),
        new(
            "lot-devices",
            "What is the current outcome of each device of this lot?",
            [new("lot", "the lot", Required: true), new("outcome", "only this outcome", "outcome = $outcome")],
            $"""
            select device, outcome, attempt, scoring, started_at, captures_taken, captures_valid, reason
            from device_outcomes where lot = $lot and current {NamedQuery.Marker} order by device
            """),
        new(
            "worst-20",
            "Which values of this quantity lie nearest to a limit, relative to it, or farthest outside?",
            [Quantity, MeasuredLot, MeasuredAt, new("limit", "how many rows", Default: 20)],
            $"""
            select r.device, lot.text as lot, point.text as operating_point, m.value, m.expanded_uncertainty,
              unit.text as unit, m.lower_limit, m.upper_limit, m.margin, m.conformity, r.uid as run
            from measurement m
            join run r on r.id = m.run
            join decision d on d.run = m.run and d.scoring = m.scoring
            left join word lot on lot.id = m.lot
            join word point on point.id = m.operating_point
            join word unit on unit.id = m.unit
            where m.quantity = (select id from word where text = $quantity) and m.margin is not null
              and {Views.IsCurrent} {NamedQuery.Marker}
            order by m.margin limit $limit
            """),
        new(
            "distribution-by-lot",
            "How is this quantity distributed in each lot and operating point?",
            [Quantity, MeasuredLot, MeasuredAt],
            $"""
            with one as (
              select m.lot, m.operating_point, m.definition, m.unit, m.value, m.conformity,
                avg(m.value) over (partition by m.lot, m.operating_point, m.definition, m.unit) as mean
              from measurement m
              join run r on r.id = m.run
              join decision d on d.run = m.run and d.scoring = m.scoring
              where m.quantity = (select id from word where text = $quantity) and m.value is not null
                and {Views.IsCurrent} {NamedQuery.Marker}),
            many as (
              select lot, operating_point, definition, unit, count(*) as devices, max(mean) as mean,
                case when count(*) > 1 then sqrt(sum((value - mean) * (value - mean)) / (count(*) - 1)) end
                  as standard_deviation,
                min(value) as lowest, max(value) as highest, sum(conformity = 'fails') as failing
              from one group by lot, operating_point, definition, unit)
            select lot.text as lot, point.text as operating_point, definition.text as definition, a.devices, a.mean,
              a.standard_deviation, a.lowest, a.highest, unit.text as unit, a.failing
            from many a
            left join word lot on lot.id = a.lot
            join word point on point.id = a.operating_point
            join word definition on definition.id = a.definition
            join word unit on unit.id = a.unit
            order by lot.text, point.text, definition.text
            """),
        new(
            "out-of-limit",
            "Which current values fail their limits?",
            [
                new("lot", "only this lot", "lot = $lot"),
                new("device", "only this device", "device = $device"),
                new("quantity", "only this quantity", "quantity = $quantity"),
                new("at", "only this operating point", "operating_point = $at"),
                new("limit", "how many rows", Default: 1000),
            ],
            $"""
            select device, lot, operating_point, quantity, value, expanded_uncertainty, unit, lower_limit, upper_limit,
              run
            from measurements where conformity = 'fails' and current {NamedQuery.Marker}
            order by run, operating_point, quantity limit $limit
            """),
        new(
            "captures-rejected",
            "Which captures were not valid, and why?",
            [
                new("device", "only this device", "device = $device"),
                new("run", "only this run", "run = $run"),
                new("at", "only this operating point", "operating_point = $at"),
                new("limit", "how many rows", Default: 1000),
            ],
            $"""
            select taken_at, device, operating_point, capture, findings, bus_voltage, load_current, run
            from captures where valid = 0 {NamedQuery.Marker} order by run, taken_at limit $limit
            """),
        new(
            "capture-values",
            "What did each capture of this device give?",
            [
                new("device", "serial of the device", Required: true),
                new("run", "only this run", "run = $run"),
                new("quantity", "only this quantity", "quantity = $quantity"),
                new("at", "only this operating point", "operating_point = $at"),
            ],
            $"""
            select run, operating_point, capture, quantity, definition, value, reason
            from capture_values where device = $device {NamedQuery.Marker}
            order by run, operating_point, capture, quantity, definition
            """),
        new(
            "run-values",
            "What was measured in this run, by each scoring?",
            [new("run", "identity of the run", Required: true)],
            "select * from measurements where run = $run order by scoring, operating_point, quantity, definition"),
        new(
            "run-events",
            "What happened in this run?",
            [
                new("run", "identity of the run", Required: true),
                new("severity", "only this severity", "severity = $severity"),
            ],
            $"select at, source, severity, kind, message from events where run = $run {NamedQuery.Marker}"),
        new(
            "notes",
            "What became of the devices after their runs: released, scrapped, returned, conceded?",
            [
                new("lot", "only this lot", "lot = $lot"),
                new("device", "only this device", "device = $device"),
                new("kind", "only notes of this kind: release, scrap, return or concession", "kind = $kind"),
                new("limit", "how many rows", Default: 1000),
            ],
            $"""
            select at, device, lot, kind, author, because, entry
            from notes where true {NamedQuery.Marker} order by at desc, entry desc limit $limit
            """),
        new(
            "leakage-holds",
            "What leaked at each hold of the bus with both gates off?",
            [
                new("device", "only this device", "device = $device"),
                new("lot", "only this lot", "lot = $lot"),
                new("run", "only this run", "run = $run"),
                new("limit", "how many rows", Default: 1000),
            ],
            $"""
            select at, device, lot, operating_point, bus_voltage, leakage, bound, conforms, supply_current,
              first_voltage, last_voltage, seconds, run
            from leakage_holds where true {NamedQuery.Marker} order by at desc limit $limit
            """),
        new(
            "companions",
            "In how many captures has each companion taken part, over all runs?",
            [new("companion", "only this companion", "companion = $companion")],
            $"""
            select companion, runs, captures_taken, proving_captures, last_started_at
            from companions where true {NamedQuery.Marker} order by companion
            """),
        new(
            "last-runs",
            "Which runs were the last, ended or not?",
            [
                new("lot", "only this lot", "r.lot = (select id from word where text = $lot)"),
                new("limit", "how many rows", Default: 20),
            ],
            $"""
            select r.started_at, r.uid as run, r.device, lot.text as lot, r.attempt, bench.text as bench, r.operator,
              coalesce(d.outcome, 'no end') as outcome, d.reason
            from run r
            left join decision d on d.run = r.id
              and d.scoring = (select max(n.scoring) from decision n where n.run = r.id)
            left join word lot on lot.id = r.lot
            join word bench on bench.id = r.bench
            where true {NamedQuery.Marker} order by r.id desc limit $limit
            """),
    ];

    /// <summary>The question of a name.</summary>
    /// <exception cref="QueryException">No question has the name.</exception>
    public static NamedQuery Find(string name) =>
        All.FirstOrDefault(query => query.Name == name)
        ?? throw new QueryException(
            $"there is no question '{name}'; the questions are {string.Join(", ", All.Select(query => query.Name))}.");
}
