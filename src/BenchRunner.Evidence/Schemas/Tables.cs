namespace BenchRunner.Evidence.Schemas;

/// <summary>The tables under the seal, and the indexes of the questions that are asked of them.</summary>
/// <remarks>
/// Texts that repeat are kept once in <c>word</c>, so that a million devices stay small; the lot stands in
/// <c>measurement</c> again, so that a lot's values are one stretch of an index. <c>margin</c> is the distance to the
/// nearest limit relative to that limit, negative outside; it is computed by the database and not part of the seal.
/// Rows of scoring 0 belong to the run and its seal.
/// </remarks>
internal static class Tables
{
    /// <summary>Statements that make tables and indexes.</summary>
    public const string Sql = """
        create table origin (
          id integer primary key,
          uid text not null unique,
          created_at text not null
        ) strict;

        create table word (
          id integer primary key,
          text text not null unique
        ) strict;

        create table content (
          id integer primary key,
          sha256 text not null unique,
          bytes blob not null
        ) strict;

        create table run (
          id integer primary key,
          uid text not null unique,
          origin integer not null references origin (id),
          device text not null,
          lot integer references word (id),
          attempt integer not null check (attempt >= 1),
          again text,
          part integer not null references word (id),
          kind text not null check (kind in ('mosfet', 'igbt', 'diode')),
          position text not null check (position in ('low', 'high', 'both')),
          companion text,
          sequence integer not null references word (id),
          sequence_revision integer not null,
          sequence_content integer not null references content (id),
          bench integer not null references word (id),
          simulated integer not null check (simulated in (0, 1)),
          operator text,
          armed_by text,
          algorithm integer not null references word (id),
          platform integer not null references word (id),
          started_at text not null
        ) strict;
        create index run_by_device on run (device);
        create index run_by_lot on run (lot, device, attempt) where lot is not null;

        create table run_file (
          run integer not null references run (id),
          role text not null,
          path text not null,
          content integer not null references content (id),
          primary key (run, role, path, content)
        ) strict, without rowid;

        create table instrument (
          run integer not null references run (id),
          role text not null,
          identity text not null,
          serial text,
          firmware text,
          calibrated_at text,
          due_at text,
          certificate text,
          primary key (run, role)
        ) strict, without rowid;

        create table event (
          run integer not null references run (id),
          ordinal integer not null,
          at text not null,
          source text not null,
          severity text not null check (severity in ('detail', 'information', 'warning', 'error', 'alarm')),
          kind text not null,
          message text not null,
          primary key (run, ordinal)
        ) strict, without rowid;

        create table capture (
          id integer primary key,
          run integer not null references run (id),
          ordinal integer not null,
          operating_point integer not null references word (id),
          number integer not null,
          taken_at text not null,
          bus_voltage real,
          temperature real,
          first_pulse real,
          gap real,
          second_pulse real,
          gate_on real,
          gate_off real,
          channels text not null,
          samples integer not null,
          raw_bytes integer not null,
          stored_bytes integer not null,
          payload_sha256 text not null,
          unique (run, ordinal),
          unique (run, operating_point, number)
        ) strict;

        create table trace (
          capture integer not null references capture (id),
          channel text not null,
          offset integer not null,
          length integer not null,
          codec integer not null,
          samples integer not null,
          time_origin real not null,
          sample_interval real not null,
          increment real not null,
          value_origin real not null,
          reference real not null,
          low_rail integer not null,
          high_rail integer not null,
          sha256 text not null,
          primary key (capture, channel)
        ) strict, without rowid;

        create table payload (
          capture integer primary key references capture (id),
          bytes blob not null
        ) strict;

        create table verdict (
          capture integer not null references capture (id),
          scoring integer not null check (scoring >= 0),
          valid integer not null check (valid in (0, 1)),
          findings text not null,
          not_evaluated text not null,
          load_current real,
          bus_voltage real,
          next_first_pulse real,
          primary key (capture, scoring)
        ) strict, without rowid;

        create table capture_value (
          capture integer not null references capture (id),
          scoring integer not null check (scoring >= 0),
          quantity integer not null references word (id),
          definition integer not null references word (id),
          value real,
          unit integer not null references word (id),
          from_time real,
          to_time real,
          reason text,
          primary key (capture, scoring, quantity, definition)
        ) strict, without rowid;

        create table decision (
          run integer not null references run (id),
          scoring integer not null check (scoring >= 0),
          outcome text not null
            check (outcome in ('accepted', 'rejected', 'undecided', 'not-measured', 'stopped')),
          reason text,
          captures_taken integer not null,
          captures_valid integer not null,
          sequence integer not null references word (id),
          sequence_revision integer not null,
          sequence_content integer not null references content (id),
          algorithm integer not null references word (id),
          platform integer not null references word (id),
          scored_at text not null,
          primary key (run, scoring)
        ) strict, without rowid;

        create table measurement (
          run integer not null references run (id),
          scoring integer not null check (scoring >= 0),
          operating_point integer not null references word (id),
          quantity integer not null references word (id),
          definition integer not null references word (id),
          lot integer references word (id),
          value real,
          unit integer not null references word (id),
          standard_uncertainty real,
          expanded_uncertainty real,
          coverage_factor real,
          degrees_of_freedom real,
          captures integer not null,
          lower_limit real,
          upper_limit real,
          conformity text check (conformity in ('conforms', 'fails', 'undecided')),
          reason text,
          margin real generated always as (nullif(min(
            coalesce((upper_limit - value) / coalesce(nullif(abs(upper_limit), 0.0), 1.0), 9e999),
            coalesce((value - lower_limit) / coalesce(nullif(abs(lower_limit), 0.0), 1.0), 9e999)), 9e999)) virtual,
          primary key (run, scoring, operating_point, quantity, definition)
        ) strict, without rowid;
        create index measurement_by_lot on measurement (quantity, lot, margin);
        create index measurement_by_margin on measurement (quantity, margin) where margin is not null;
        create index measurement_outside on measurement (lot, quantity) where conformity = 'fails';

        create table seal (
          id integer primary key,
          origin integer not null references origin (id),
          ordinal integer not null check (ordinal >= 1),
          kind text not null check (kind in ('run', 'entry')),
          run integer references run (id),
          sealed_at text not null,
          digest text not null,
          previous text not null,
          seal text not null,
          unique (origin, ordinal)
        ) strict;
        create unique index seal_of_run on seal (run) where kind = 'run';
        """;

    /// <summary>Each table under the seal with its keys: no row of it is ever changed, deleted or replaced.</summary>
    public static IReadOnlyList<(string Table, string[][] Keys)> AppendOnly { get; } =
    [
        ("origin", [["id"], ["uid"]]),
        ("word", [["id"], ["text"]]),
        ("content", [["id"], ["sha256"]]),
        ("run", [["id"], ["uid"]]),
        ("run_file", [["run", "role", "path", "content"]]),
        ("instrument", [["run", "role"]]),
        ("event", [["run", "ordinal"]]),
        ("capture", [["id"], ["run", "ordinal"], ["run", "operating_point", "number"]]),
        ("trace", [["capture", "channel"]]),
        ("payload", [["capture"]]),
        ("verdict", [["capture", "scoring"]]),
        ("capture_value", [["capture", "scoring", "quantity", "definition"]]),
        ("decision", [["run", "scoring"]]),
        ("measurement", [["run", "scoring", "operating_point", "quantity", "definition"]]),
        ("seal", [["id"], ["origin", "ordinal"]]),
    ];
}
