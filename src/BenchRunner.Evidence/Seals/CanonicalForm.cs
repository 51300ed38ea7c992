using System.Buffers.Binary;
using System.Security.Cryptography;
using System.Text;
using BenchRunner.Evidence.Stores;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Seals;

/// <summary>What a run or an entry stored, as one sequence of bytes that any program can form again
/// (docs/evidence.md).</summary>
/// <remarks>
/// Row numbers of this file are resolved to what they stand for, so that a run keeps its seal when it is brought into
/// another file. A table that has no row of a run adds nothing, so that one which came with a later format leaves the
/// seals of older runs as they are. A row is the table's name and its columns in the order given here, each as one
/// item: <c>n</c> for NULL; <c>i</c>, decimal digits, <c>;</c> for an integer; <c>r</c> and 8 bytes (IEEE 754,
/// big-endian) for a real; <c>t</c>, length in bytes, <c>:</c>, UTF-8 for a text; then a newline.
/// </remarks>
internal static class CanonicalForm
{
    /// <summary>The tables of a run in order: name, and the rows of the run whose id is <c>?1</c>.</summary>
    private static readonly IReadOnlyList<(string Table, string Sql)> _runTables =
    [
        ("run", """
            select r.uid, o.uid, r.device, lot.text, r.attempt, r.again, part.text, r.kind, r.position, r.companion,
              sequence.text, r.sequence_revision, c.sha256, bench.text, r.simulated, r.operator, r.armed_by,
              algorithm.text, platform.text, r.started_at
            from run r join origin o on o.id = r.origin
            left join word lot on lot.id = r.lot join word part on part.id = r.part
            join word sequence on sequence.id = r.sequence join content c on c.id = r.sequence_content
            join word bench on bench.id = r.bench join word algorithm on algorithm.id = r.algorithm
            join word platform on platform.id = r.platform
            where r.id = ?1
            """),
        ("run_file", """
            select f.role, f.path, c.sha256 from run_file f join content c on c.id = f.content
            where f.run = ?1 order by f.role, f.path, c.sha256
            """),
        ("instrument", """
            select role, identity, serial, firmware, calibrated_at, due_at, certificate
            from instrument where run = ?1 order by role
            """),
        ("event", "select ordinal, at, source, severity, kind, message from event where run = ?1 order by ordinal"),
        ("capture", """
            select c.ordinal, point.text, c.number, c.taken_at, c.bus_voltage, c.temperature, c.first_pulse, c.gap,
              c.second_pulse, c.gate_on, c.gate_off, c.channels, c.samples, c.raw_bytes, c.stored_bytes,
              c.payload_sha256
            from capture c join word point on point.id = c.operating_point where c.run = ?1 order by c.ordinal
            """),
        ("trace", """
            select c.ordinal, t.channel, t.offset, t.length, t.codec, t.samples, t.time_origin, t.sample_interval,
              t.increment, t.value_origin, t.reference, t.low_rail, t.high_rail, t.sha256
            from capture c join trace t on t.capture = c.id where c.run = ?1 order by c.ordinal, t.channel
            """),
        ("verdict", """
            select c.ordinal, v.valid, v.findings, v.not_evaluated, v.load_current, v.bus_voltage, v.next_first_pulse
            from capture c join verdict v on v.capture = c.id and v.scoring = 0 where c.run = ?1 order by c.ordinal
            """),
        ("capture_value", """
            select c.ordinal, quantity.text, definition.text, v.value, unit.text, v.from_time, v.to_time, v.reason
            from capture c join capture_value v on v.capture = c.id and v.scoring = 0
            join word quantity on quantity.id = v.quantity join word definition on definition.id = v.definition
            join word unit on unit.id = v.unit
            where c.run = ?1 order by c.ordinal, quantity.text, definition.text
            """),
        ("hold", """
            select h.ordinal, point.text, h.at, h.bus_voltage, h.supply_current, h.first_voltage, h.last_voltage,
              h.seconds, h.leakage, h.bound, h.conforms
            from hold h join word point on point.id = h.operating_point where h.run = ?1 order by h.ordinal
            """),
        ("acquisition", """
            select c.ordinal, a.count_before, a.count_after
            from capture c join acquisition a on a.capture = c.id where c.run = ?1 order by c.ordinal
            """),
        ("measurement", """
            select point.text, quantity.text, definition.text, lot.text, m.value, unit.text, m.standard_uncertainty,
              m.expanded_uncertainty, m.coverage_factor, m.degrees_of_freedom, m.captures, m.lower_limit,
              m.upper_limit, m.conformity, m.reason
            from measurement m join word point on point.id = m.operating_point
            join word quantity on quantity.id = m.quantity join word definition on definition.id = m.definition
            join word unit on unit.id = m.unit left join word lot on lot.id = m.lot
            where m.run = ?1 and m.scoring = 0 order by point.text, quantity.text, definition.text
            """),
        ("decision", """
            select d.outcome, d.reason, d.captures_taken, d.captures_valid, sequence.text, d.sequence_revision,
              c.sha256, algorithm.text, platform.text, d.scored_at
            from decision d join word sequence on sequence.id = d.sequence
            join content c on c.id = d.sequence_content join word algorithm on algorithm.id = d.algorithm
            join word platform on platform.id = d.platform
            where d.run = ?1 and d.scoring = 0
            """),
    ];

    /// <summary>The tables of an entry in order, as those of a run. An entry has rows in those of its
    /// kind.</summary>
    private static readonly IReadOnlyList<(string Table, string Sql)> _entryTables =
    [
        ("entry", """
            select e.uid, o.uid, e.kind, e.at, e.author from entry e join origin o on o.id = e.origin where e.id = ?1
            """),
        ("note", """
            select n.device, lot.text, n.kind, n.because
            from note n join word lot on lot.id = n.lot where n.entry = ?1
            """),
        ("placement", "select r.uid, p.place from placement p join run r on r.id = p.run where p.entry = ?1"),
    ];

    /// <summary>SHA-256 over the canonical form of a run as it is stored, lower-case hexadecimal.</summary>
    public static string OfRun(SqlSession session, long run) => Digest(session, _runTables, run);

    /// <summary>SHA-256 over the canonical form of an entry, as of a run.</summary>
    public static string OfEntry(SqlSession session, long entry) => Digest(session, _entryTables, entry);

    /// <summary>The seal that chains a digest to the seal before it: SHA-256 over the canonical row
    /// <c>seal</c>.</summary>
    public static string Seal(
        string origin, long ordinal, string kind, string what, string sealedAt, string digest, string previous)
    {
        using IncrementalHash hash = IncrementalHash.CreateHash(HashAlgorithmName.SHA256);
        AppendRow(hash, "seal", [origin, ordinal, kind, what, sealedAt, digest, previous]);
        return Convert.ToHexStringLower(hash.GetHashAndReset());
    }

    private static string Digest(SqlSession session, IEnumerable<(string Table, string Sql)> tables, long id)
    {
        using IncrementalHash hash = IncrementalHash.CreateHash(HashAlgorithmName.SHA256);
        foreach ((string table, string sql) in tables)
        {
            session.Read(sql, row => Append(hash, table, row), id);
        }

        return Convert.ToHexStringLower(hash.GetHashAndReset());
    }

    private static bool Append(IncrementalHash hash, string table, SqliteDataReader row)
    {
        object[] values = new object[row.FieldCount];
        row.GetValues(values);
        AppendRow(hash, table, values);
        return true;
    }

    private static void AppendRow(IncrementalHash hash, string table, ReadOnlySpan<object> values)
    {
        hash.AppendData(Encoding.UTF8.GetBytes(table));
        Span<byte> bits = stackalloc byte[9];
        bits[0] = (byte)'r';
        foreach (object value in values)
        {
            switch (value)
            {
                case DBNull:
                    hash.AppendData("n"u8);
                    break;
                case long number:
                    hash.AppendData(Ascii($"i{number};"));
                    break;
                case double number:
                    BinaryPrimitives.WriteDoubleBigEndian(bits[1..], number);
                    hash.AppendData(bits);
                    break;
                case string text:
                    byte[] utf8 = Encoding.UTF8.GetBytes(text);
                    hash.AppendData(Ascii($"t{utf8.Length}:"));
                    hash.AppendData(utf8);
                    break;
                default:
                    throw new EvidenceException(
                        $"{table}: a column holds a {value.GetType().Name}, which no run stores.");
            }
        }

        hash.AppendData("\n"u8);
    }

    private static byte[] Ascii(FormattableString text) => Encoding.ASCII.GetBytes(FormattableString.Invariant(text));
}
