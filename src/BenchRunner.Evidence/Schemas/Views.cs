namespace BenchRunner.Evidence.Schemas;

/// <summary>The quality engineer's doors: views whose names and columns are a contract (docs/evidence.md).</summary>
/// <remarks>Plain SQL of SQLite 3.40, no functions of ours, so that any SQLite tool can open them.</remarks>
internal static class Views
{
    // The attempt that counts is the newest that was not stopped, or the newest where all were: a bench that fails
    // while a device is measured again takes nothing away from what was decided before.
    private const string CountingRun = """
        (select a.id from run a join decision e on e.run = a.id and e.scoring = 0
         where a.lot = r.lot and a.device = r.device
         order by e.outcome = 'stopped', a.attempt desc, a.uid desc limit 1)
        """;

    /// <summary>Whether decision <c>d</c> of run <c>r</c> is the newest of the counting attempt.</summary>
    public const string IsCurrent = $"""
        (d.scoring = (select max(n.scoring) from decision n where n.run = d.run)
         and (r.lot is null or r.id = {CountingRun}))
        """;

    private const string FirstPass = """
        (select n.outcome from decision n
         where n.run = (select a.id from run a join decision e on e.run = a.id and e.scoring = 0
                        where a.lot = r.lot and a.device = r.device and e.outcome <> 'stopped'
                        order by a.attempt, a.uid limit 1)
         order by n.scoring desc limit 1)
        """;

    /// <summary>Statements that make the views.</summary>
    public const string Sql = $"""
        create view device_outcomes as
        select r.uid as run, r.device, lot.text as lot, part.text as part, r.position, r.companion,
          sequence.text as sequence, d.sequence_revision, content.sha256 as sequence_sha256, bench.text as bench,
          r.simulated, r.operator, r.attempt, d.scoring, {IsCurrent} as current,
          r.started_at, ended.scored_at as finished_at, d.outcome, d.captures_taken, d.captures_valid, d.reason
        from run r
        join decision d on d.run = r.id
        join decision ended on ended.run = r.id and ended.scoring = 0
        left join word lot on lot.id = r.lot
        join word part on part.id = r.part
        join word sequence on sequence.id = d.sequence
        join content on content.id = d.sequence_content
        join word bench on bench.id = r.bench;

        create view measurements as
        select r.uid as run, r.device, lot.text as lot, point.text as operating_point, quantity.text as quantity,
          definition.text as definition, m.value, unit.text as unit, m.standard_uncertainty, m.expanded_uncertainty,
          m.coverage_factor, m.degrees_of_freedom, m.captures, m.lower_limit, m.upper_limit, m.conformity, m.reason,
          m.scoring, {IsCurrent} as current, r.simulated, d.scored_at,
          algorithm.text as algorithm, platform.text as platform
        from measurement m
        join run r on r.id = m.run
        join decision d on d.run = m.run and d.scoring = m.scoring
        left join word lot on lot.id = m.lot
        join word point on point.id = m.operating_point
        join word quantity on quantity.id = m.quantity
        join word definition on definition.id = m.definition
        join word unit on unit.id = m.unit
        join word algorithm on algorithm.id = d.algorithm
        join word platform on platform.id = d.platform;

        create view captures as
        select r.uid as run, r.device, point.text as operating_point, c.number as capture, c.taken_at,
          v.valid, v.findings, v.not_evaluated, coalesce(v.bus_voltage, c.bus_voltage) as bus_voltage, v.load_current,
          c.temperature, c.channels, c.samples, c.raw_bytes, c.stored_bytes, r.simulated
        from capture c
        join run r on r.id = c.run
        join word point on point.id = c.operating_point
        left join verdict v on v.capture = c.id
          and v.scoring = (select max(n.scoring) from verdict n where n.capture = c.id);

        create view capture_values as
        select r.uid as run, r.device, point.text as operating_point, c.number as capture,
          quantity.text as quantity, definition.text as definition, v.value, v.reason
        from capture_value v
        join capture c on c.id = v.capture
        join run r on r.id = c.run
        join word point on point.id = c.operating_point
        join word quantity on quantity.id = v.quantity
        join word definition on definition.id = v.definition
        where v.scoring = (select max(n.scoring) from capture_value n where n.capture = v.capture);

        create view instruments as
        select r.uid as run, i.role, i.identity, i.serial, i.firmware, i.calibrated_at, i.due_at, i.certificate
        from instrument i join run r on r.id = i.run;

        create view events as
        select r.uid as run, e.at, e.source, e.severity, e.kind, e.message
        from event e join run r on r.id = e.run;

        create view lot_yield as
        select lot.text as lot, part.text as part, sequence.text as sequence, count(*) as devices,
          sum(d.outcome = 'accepted') as accepted, sum(d.outcome = 'rejected') as rejected,
          sum(d.outcome = 'undecided') as undecided, sum(d.outcome = 'not-measured') as not_measured,
          sum(d.outcome = 'stopped') as stopped, avg({FirstPass} = 'accepted') as first_pass_yield
        from run r
        join decision d on d.run = r.id
        join word lot on lot.id = r.lot
        join word part on part.id = r.part
        join word sequence on sequence.id = d.sequence
        where {IsCurrent}
        group by lot.text, part.text, sequence.text;
        """;
}
