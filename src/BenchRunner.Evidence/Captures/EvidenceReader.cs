using System.Globalization;
using System.Security.Cryptography;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Codecs;
using BenchRunner.Evidence.Stores;
using BenchRunner.Signals.Traces;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Captures;

/// <summary>Reads captures and the files that a run followed back, bit for bit; beside a writer too. One thread at a time.</summary>
public sealed class EvidenceReader : IDisposable
{
    private readonly string _path;
    private readonly SqlSession _session;

    private readonly bool _owned;

    private EvidenceReader(string path, SqlSession session, bool owned)
    {
        _owned = owned;
        _path = path;
        _session = session;
    }

    /// <summary>Opens an evidence file for reading.</summary>
    /// <exception cref="EvidenceException">There is no such file, it is none of ours, newer, or damaged.</exception>
    public static EvidenceReader Open(string path) => new(path, SqlSession.OpenToRead(path), owned: true);

    /// <summary>The captures of a run, in the order in which they were taken.</summary>
    /// <param name="run">Identity of the run.</param>
    /// <returns>The captures; none where the run is not in the file.</returns>
    /// <exception cref="EvidenceException">The file cannot be read.</exception>
    public IReadOnlyList<StoredCapture> Captures(string run)
    {
        const string sql = """
            select c.id, point.text, c.number, c.taken_at, c.bus_voltage, c.temperature,
              c.first_pulse, c.gap, c.second_pulse, c.gate_on, c.gate_off,
              (select v.valid from verdict v where v.capture = c.id order by v.scoring desc limit 1),
              a.count_before, a.count_after
            from run r join capture c on c.run = r.id join word point on point.id = c.operating_point
            left join acquisition a on a.capture = c.id
            where r.uid = ?1 order by c.ordinal
            """;
        return Guarded(() => _session.Read(sql, Capture, run));
    }

    /// <summary>The captures of a device in all its runs, the oldest run first, each run in the order in which it took
    /// them.</summary>
    /// <param name="device">Serial of the device.</param>
    /// <returns>The captures; none where the device is not in the file.</returns>
    /// <exception cref="EvidenceException">The file cannot be read.</exception>
    public IReadOnlyList<FoundCapture> CapturesOf(string device)
    {
        const string sql = """
            select c.id, r.uid, r.started_at, point.text, c.number, c.payload_sha256, v.findings, v.not_evaluated
            from run r join capture c on c.run = r.id join word point on point.id = c.operating_point
            left join verdict v on v.capture = c.id
              and v.scoring = (select max(n.scoring) from verdict n where n.capture = c.id)
            where r.device = ?1 order by r.started_at, r.id, c.ordinal
            """;
        return Guarded(() => _session.Read(
            sql,
            row => new FoundCapture(
                row.GetInt64(0), row.GetString(1), row.GetString(2), row.GetString(3), row.GetInt32(4),
                row.GetString(5), row.IsDBNull(6) ? null : row.GetString(6), row.IsDBNull(7) ? null : row.GetString(7)),
            device));
    }

    /// <summary>Serials of the devices in the file, in the order of their text.</summary>
    /// <param name="most">How many at most.</param>
    /// <exception cref="EvidenceException">The file cannot be read.</exception>
    public IReadOnlyList<string> Devices(int most)
    {
        const string sql = "select distinct device from run order by device limit ?1";
        return Guarded(() => _session.Read(sql, row => row.GetString(0), most));
    }

    /// <summary>The files that a run followed, byte for byte: its sequence, its bench, its dialects.</summary>
    /// <param name="run">Identity of the run.</param>
    /// <returns>The files, ordered by role and path; none where the run is not in the file.</returns>
    /// <exception cref="EvidenceException">A file was altered, or the evidence cannot be read.</exception>
    public IReadOnlyList<SourceFile> Files(string run)
    {
        const string sql = """
            select f.role, f.path, c.bytes, c.sha256
            from run r join run_file f on f.run = r.id join content c on c.id = f.content
            where r.uid = ?1 order by f.role, f.path
            """;
        return Guarded(() => _session.Read(sql, StoredFile, run));
    }

    /// <summary>The traces of a capture as the scope gave them, in the order in which they were stored.</summary>
    /// <param name="capture"><see cref="StoredCapture.Id"/>.</param>
    /// <exception cref="EvidenceException">There is no such capture, it was altered, or the file cannot be
    /// read.</exception>
    public IReadOnlyList<RawTrace> ReadTraces(long capture) => Guarded(() =>
    {
        if (_session.Value("select bytes from payload where capture = ?1", capture) is not byte[] payload)
        {
            throw new EvidenceException($"{_path}: capture {capture} has no traces here.");
        }

        const string sql = """
            select channel, time_origin, sample_interval, increment, value_origin, reference, low_rail, high_rail,
              offset, length, codec, samples, sha256
            from trace where capture = ?1 order by offset
            """;
        return _session.Read(sql, row => Trace(row, capture, payload), capture);
    });

    /// <inheritdoc/>
    public void Dispose()
    {
        if (_owned)
        {
            _session.Dispose();
        }
    }

    /// <summary>Reads by a session that is open already and stays so.</summary>
    internal static EvidenceReader Over(string path, SqlSession session) => new(path, session, owned: false);

    private SourceFile StoredFile(SqliteDataReader row)
    {
        var file = new SourceFile(row.GetString(0), row.GetString(1), row.GetFieldValue<byte[]>(2));
        return file.Sha256 == row.GetString(3)
            ? file
            : throw new EvidenceException(
                $"{_path}: {file.Role} {file.Path} is not what was stored; audit the file.");
    }

    private static StoredCapture Capture(SqliteDataReader row) => new(
        row.GetInt64(0),
        row.GetString(1),
        row.GetInt32(2),
        DateTimeOffset.Parse(row.GetString(3), CultureInfo.InvariantCulture, DateTimeStyles.AssumeUniversal),
        Real(row, 4),
        Real(row, 5),
        row.IsDBNull(6)
            ? null
            : new TrainSet(row.GetDouble(6), row.GetDouble(7), row.GetDouble(8), row.GetDouble(9), row.GetDouble(10)),
        row.IsDBNull(11) ? null : row.GetInt64(11) != 0)
    {
        CountBefore = row.IsDBNull(12) ? null : row.GetInt64(12),
        CountAfter = row.IsDBNull(13) ? null : row.GetInt64(13),
    };

    private static double? Real(SqliteDataReader row, int column) =>
        row.IsDBNull(column) ? null : row.GetDouble(column);

    private RawTrace Trace(SqliteDataReader row, long capture, byte[] payload)
    {
        string channel = row.GetString(0);
        long offset = row.GetInt64(8);
        long length = row.GetInt64(9);
        if (offset < 0 || length < 0 || offset > payload.Length - length
            || ChannelNames.Parse(channel) is not { } known)
        {
            throw Altered(capture, channel);
        }

        short[] codes = TraceCodec.Decode(
            row.GetInt32(10), payload.AsSpan((int)offset, (int)length), row.GetInt32(11));
        if (Convert.ToHexStringLower(SHA256.HashData(TraceCodec.Bytes(codes))) != row.GetString(12))
        {
            throw Altered(capture, channel);
        }

        return new RawTrace(
            known, codes, row.GetDouble(1), row.GetDouble(2), row.GetDouble(3), row.GetDouble(4), row.GetDouble(5),
            row.GetInt16(6), row.GetInt16(7));
    }

    private EvidenceException Altered(long capture, string channel) =>
        new($"{_path}: capture {capture}, {channel}: its trace is not what was stored; audit the file.");

    private T Guarded<T>(Func<T> work)
    {
        try
        {
            return work();
        }
        catch (SqliteException error)
        {
            throw EvidenceFault.Explain(_path, error);
        }
    }
}
