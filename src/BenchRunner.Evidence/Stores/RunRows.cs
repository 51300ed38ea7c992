using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Holds;
using BenchRunner.Evidence.Schemas;
using BenchRunner.Evidence.Seals;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Evidence.Stores;

/// <summary>The rows of a run, each written inside the caller's transaction.</summary>
internal static class RunRows
{
    public static long Begin(SqlSession to, RunHeader header, string uid, int attempt, string startedAt)
    {
        Sequence sequence = header.Sequence;
        long run = to.Insert(
            """
            insert into run (uid, origin, device, lot, attempt, again, part, kind, position, companion, sequence,
              sequence_revision, sequence_content, bench, simulated, operator, armed_by, algorithm, platform,
              started_at)
            values (?1, (select min(id) from origin), ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13, ?14, ?15, ?16,
              ?17, ?18, ?19)
            """,
            uid, header.Device, to.Word(header.Lot), attempt, header.Again, to.Word(sequence.Part),
            Text.Of(sequence.Kind), Text.Of(sequence.Position), header.Companion, to.Word(sequence.Name),
            sequence.Revision, Content(to, sequence.Source), to.Word(header.Bench), header.Simulated, header.Operator,
            header.ArmedBy, to.Word(header.Algorithm), to.Word(header.Platform), startedAt);
        IEnumerable<SourceFile> files = header.Files.Prepend(sequence.Source);
        // One dialect may serve two roles; it is stored once.
        foreach (SourceFile file in files.DistinctBy(file => (file.Role, file.Path, file.Sha256)))
        {
            to.Execute(
                "insert into run_file (run, role, path, content) values (?1, ?2, ?3, ?4)",
                run, file.Role, file.Path, Content(to, file));
        }

        return run;
    }

    public static void Instrument(
        SqlSession to, long run, string role, string identity, string? serial, string? firmware) =>
        to.Execute(
            "insert into instrument (run, role, identity, serial, firmware) values (?1, ?2, ?3, ?4, ?5)",
            run, role, identity, serial, firmware);

    public static void Event(SqlSession to, long run, BenchEvent happened) =>
        to.Execute(
            """
            insert into event (run, ordinal, at, source, severity, kind, message)
            values (?1, (select coalesce(max(ordinal), 0) + 1 from event where run = ?1), ?2, ?3, ?4, ?5, ?6)
            """,
            run, Text.Time(happened.At), happened.Source, Text.Of(happened.Severity), happened.Kind, happened.Message);

    public static long Capture(SqlSession to, long run, int ordinal, CaptureRow row, Payload payload)
    {
        string channels = string.Join(' ', row.Traces.Select(trace => trace.Channel.Name()));
        long capture = to.Insert(
            """
            insert into capture (run, ordinal, operating_point, number, taken_at, bus_voltage, temperature, first_pulse,
              gap, second_pulse, gate_on, gate_off, channels, samples, raw_bytes, stored_bytes, payload_sha256)
            values (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13, ?14, ?15, ?16, ?17)
            """,
            run, ordinal, to.Word(row.OperatingPoint), row.Number, Text.Time(row.TakenAt), row.BusVoltage,
            row.Temperature, row.Train?.First, row.Train?.Gap, row.Train?.Second, row.Train?.GateOn,
            row.Train?.GateOff, channels, row.Traces.Max(trace => trace.Codes.Length),
            row.Traces.Sum(trace => 2L * trace.Codes.Length), payload.Bytes.Length, payload.Sha256);
        foreach (PayloadEntry entry in payload.Directory)
        {
            RawTrace trace = entry.Trace;
            to.Execute(
                """
                insert into trace (capture, channel, offset, length, codec, samples, time_origin, sample_interval,
                  increment, value_origin, reference, low_rail, high_rail, sha256)
                values (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13, ?14)
                """,
                capture, trace.Channel.Name(), entry.Offset, entry.Length, entry.Codec, trace.Codes.Length,
                trace.TimeOrigin, trace.SampleInterval, trace.Increment, trace.Origin, trace.Reference, trace.LowRail,
                trace.HighRail, entry.Sha256);
        }

        to.Execute("insert into payload (capture, bytes) values (?1, ?2)", capture, payload.Bytes);
        if (row.CountBefore is not null || row.CountAfter is not null)
        {
            to.Execute(
                "insert into acquisition (capture, count_before, count_after) values (?1, ?2, ?3)",
                capture, row.CountBefore, row.CountAfter);
        }

        return capture;
    }

    public static void Verdict(
        SqlSession to, long capture, int scoring, Verdict verdict, double? loadCurrent, double? busVoltage) =>
        to.Execute(
            """
            insert into verdict (capture, scoring, valid, findings, not_evaluated, load_current, bus_voltage,
              next_first_pulse)
            values (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8)
            """,
            capture, scoring, verdict.IsValid, Text.Findings(verdict.Findings), Text.Words(verdict.NotEvaluated),
            loadCurrent, busVoltage, verdict.CorrectedFirstPulse);

    public static void CaptureValue(SqlSession to, long capture, int scoring, QuantityValue value) =>
        to.Execute(
            """
            insert into capture_value (capture, scoring, quantity, definition, value, unit, from_time, to_time, reason)
            values (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9)
            """,
            capture, scoring, to.Word(value.Quantity), to.Word(value.Definition), value.Value, to.Word(value.Unit),
            value.From, value.To, value.Reason);

    public static void Measurement(SqlSession to, long run, int scoring, MeasuredValue value) =>
        to.Execute(
            """
            insert into measurement (run, scoring, operating_point, quantity, definition, lot, value, unit,
              standard_uncertainty, expanded_uncertainty, coverage_factor, degrees_of_freedom, captures, lower_limit,
              upper_limit, conformity, reason)
            values (?1, ?2, ?3, ?4, ?5, (select lot from run where id = ?1), ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13, ?14,
              ?15, ?16)
            """,
            run, scoring, to.Word(value.OperatingPoint), to.Word(value.Quantity), to.Word(value.Definition),
            value.Value, to.Word(value.Unit), value.StandardUncertainty, value.ExpandedUncertainty,
            value.CoverageFactor, value.DegreesOfFreedom, value.Captures, value.Lower, value.Upper,
            Text.Of(value.Conformity), value.Reason);

    public static void Hold(SqlSession to, long run, int ordinal, HoldRow row) =>
        to.Execute(
            """
            insert into hold (run, ordinal, operating_point, at, bus_voltage, supply_current, first_voltage,
              last_voltage, seconds, leakage, bound, conforms)
            values (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12)
            """,
            run, ordinal, to.Word(row.OperatingPoint), Text.Time(row.At), row.BusVoltage, row.SupplyCurrent,
            row.FirstVoltage, row.LastVoltage, row.Seconds, row.Leakage, row.Bound, row.Conforms);

    /// <summary>Ends a run: its decision of scoring 0, then the seal over all it stored.</summary>
    public static string End(SqlSession to, long run, Outcome outcome, string? reason, string endedAt)
    {
        to.Execute(
            $"""
            insert into decision (run, scoring, outcome, reason, captures_taken, captures_valid, sequence,
              sequence_revision, sequence_content, algorithm, platform, scored_at)
            select r.id, 0, ?2, ?3, count(c.id), coalesce(sum(v.valid), 0), r.sequence, r.sequence_revision,
              r.sequence_content, r.algorithm, r.platform, ?4
            from run r
            left join capture c on c.run = r.id
              and c.operating_point not in (select id from word where text in {Additions.Uncounted})
            left join verdict v on v.capture = c.id and v.scoring = 0
            where r.id = ?1
            group by r.id
            """,
            run, Text.Of(outcome), reason, endedAt);
        return SealChain.AppendRun(to, run, endedAt);
    }

    private static object Content(SqlSession to, SourceFile file) =>
        to.Value("select id from content where sha256 = ?1", file.Sha256)
        ?? to.Insert("insert into content (sha256, bytes) values (?1, ?2)", file.Sha256, file.Bytes);
}
