using System.Security.Cryptography;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Schemas;
using BenchRunner.Evidence.Seals;
using BenchRunner.Evidence.Stores;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Audits;

/// <summary>Shows that nothing stored was altered, lost or half-written, by computing every hash and seal
/// again.</summary>
/// <remarks>
/// Whoever can write the file can also write new seals from some run onwards, or cut the last runs off: only a seal
/// that was kept outside the file (<c>since</c>) shows that.
/// </remarks>
public sealed class EvidenceAudit
{
    private const int MostDatabaseProblems = 20;

    private readonly string _path;
    private readonly SqlSession _session;
    private readonly CancellationToken _cancel;
    private readonly List<AuditProblem> _problems = [];

    private EvidenceAudit(string path, SqlSession session, CancellationToken cancel)
    {
        _path = path;
        _session = session;
        _cancel = cancel;
    }

    /// <summary>Audits a file; it is not changed, and a writer is not disturbed.</summary>
    /// <param name="path">The file.</param>
    /// <param name="since">A seal that was kept outside and must be in the file; null: none.</param>
    /// <param name="cancel">Ends the audit.</param>
    /// <exception cref="EvidenceException">There is no such file, or it is no evidence file at all.</exception>
    /// <exception cref="OperationCanceledException">It was cancelled.</exception>
    public static AuditReport Verify(string path, string? since = null, CancellationToken cancel = default)
    {
        using SqlSession session = SqlSession.OpenToRead(path);
        return new EvidenceAudit(path, session, cancel).Verify(since);
    }

    private AuditReport Verify(string? since)
    {
        int captures = 0;
        int runs = 0;
        List<string> lastSeals = [];
        try
        {
            _session.Run("begin"); // One state of the file, whatever a writer adds meanwhile.
            runs = (int)_session.Number("select count(*) from run");
            Database();
            Form();
            Files();
            lastSeals = Chains();
            Unsealed();
            captures = Payloads();
            if (since is not null && _session.Number("select count(*) from seal where seal = ?1", since) == 0)
            {
                Report(null, "chain", $"the seal {since} is not in the file: it was cut off, or is another file's");
            }
        }
        catch (SqliteException error)
        {
            Report(null, "database", $"cannot be read to its end: {error.Message}");
        }

        return new AuditReport(runs, captures, lastSeals, _problems);
    }

    private void Report(string? run, string what, string message) =>
        _problems.Add(new AuditProblem(run, what, message));

    private void Database()
    {
        string check = $"pragma integrity_check({MostDatabaseProblems})";
        foreach (string found in _session.Read(check, row => row.GetString(0)))
        {
            if (found != "ok")
            {
                Report(null, "database", found);
            }
        }

        foreach (string table in _session.Read("pragma foreign_key_check", row => row.GetString(0)).Distinct())
        {
            Report(null, "database", $"{table} has rows that belong to rows which are not there");
        }
    }

    private void Form()
    {
        const string sql =
            "select type || ' ' || name, coalesce(sql, '') from sqlite_schema where name not like 'sqlite_%'";
        static (string Name, string Sql) Row(SqliteDataReader row) => (row.GetString(0), row.GetString(1));
        using SqlSession fresh = SqlSession.Open(":memory:", SqliteOpenMode.Memory);
        fresh.Run(Schema.Sql(_session.CheckForm(_path)));
        HashSet<(string Name, string Sql)> here = [.. _session.Read(sql, Row)];
        HashSet<(string Name, string Sql)> wanted = [.. fresh.Read(sql, Row)];
        foreach ((string name, _) in here.Except(wanted).Concat(wanted.Except(here)).DistinctBy(found => found.Name))
        {
            Report(null, "schema", $"{name} is not as this format has it");
        }
    }

    private void Files()
    {
        foreach ((string sha256, byte[] bytes) in _session.Read(
            "select sha256, bytes from content order by id", row => (row.GetString(0), row.GetFieldValue<byte[]>(1))))
        {
            if (Hash(bytes) != sha256)
            {
                Report(null, "file", $"the bytes of the file {sha256} were altered");
            }
        }
    }

    private List<string> Chains()
    {
        List<string> last = [];
        foreach ((long id, string uid) in _session.Read(
            "select id, uid from origin order by id", row => (row.GetInt64(0), row.GetString(1))))
        {
            string previous = string.Empty;
            long ordinal = 0;
            foreach (StoredSeal seal in _session.Read(StoredSeal.Sql, StoredSeal.Of, id))
            {
                _cancel.ThrowIfCancellationRequested();
                ordinal++;
                if (seal.Ordinal != ordinal || seal.Previous != previous)
                {
                    Report(
                        seal.Kind == "run" ? seal.Uid : null, "chain",
                        $"seal {seal.Ordinal} does not follow the seal before it: one is lost or swapped");
                }

                Seal(seal, uid);
                ordinal = seal.Ordinal;
                previous = seal.Seal;
            }

            if (previous.Length > 0)
            {
                last.Add(previous);
            }
        }

        return last;
    }

    private void Seal(StoredSeal seal, string origin)
    {
        bool isRun = seal.Kind == "run";
        string? run = isRun ? seal.Uid : null;
        if (seal.Uid is not { } uid || seal.Row is not { } row)
        {
            Report(
                null, "seal",
                $"seal {seal.Ordinal} stands for {(isRun ? "a run" : "an entry")} that is not there");
            return;
        }

        string what = isRun ? "the run" : $"the entry {uid}";
        if ((isRun ? CanonicalForm.OfRun(_session, row) : CanonicalForm.OfEntry(_session, row)) != seal.Digest)
        {
            Report(run, "seal", $"what {what} stored is not what was sealed: rows were altered, added or lost");
        }

        string formed = CanonicalForm.Seal(
            origin, seal.Ordinal, seal.Kind, uid, seal.SealedAt, seal.Digest, seal.Previous);
        if (formed != seal.Seal)
        {
            Report(run, "seal", $"the seal of {what} was altered itself");
        }
    }

    private void Unsealed()
    {
        const string unfinished = """
            select uid from run r
            where not exists (select 1 from seal s where s.run = r.id and s.kind = 'run') order by id
            """;
        foreach (string run in _session.Read(unfinished, row => row.GetString(0)))
        {
            Report(
                run, "unfinished",
                "the run has no end: it is going on, or its program was ended; the next writer closes it");
        }

        const string unsealed = """
            select uid from entry e
            where not exists (
              select 1 from seal s where s.origin = e.origin and s.ordinal = e.ordinal and s.kind = 'entry')
            order by id
            """;
        foreach (string entry in _session.Read(unsealed, row => row.GetString(0)))
        {
            Report(null, "unsealed", $"no seal covers the entry {entry}");
        }

        foreach (string table in new[] { "decision", "measurement", "verdict", "capture_value" })
        {
            if (_session.Number($"select exists (select 1 from {table} where scoring > 0)") != 0)
            {
                Report(null, "unsealed", $"{table} has rows of a later scoring that no seal covers");
            }
        }
    }

    private int Payloads()
    {
        using EvidenceReader reader = EvidenceReader.Over(_path, _session);
        const string sql = """
            select c.id, r.uid, c.payload_sha256, c.number
            from capture c join run r on r.id = c.run order by c.id
            """;
        var captures = _session.Read(sql, row => (
            Id: row.GetInt64(0), Run: row.GetString(1), Sha256: row.GetString(2), Number: row.GetInt64(3)));
        foreach (var capture in captures)
        {
            _cancel.ThrowIfCancellationRequested();
            if (_session.Value("select bytes from payload where capture = ?1", capture.Id) is not byte[] bytes)
            {
                Report(capture.Run, "payload", $"the traces of capture {capture.Number} are lost");
            }
            else if (Hash(bytes) != capture.Sha256)
            {
                Report(capture.Run, "payload", $"the traces of capture {capture.Number} were altered");
            }
            else
            {
                Traces(reader, capture.Id, capture.Run);
            }
        }

        return captures.Count;
    }

    private void Traces(EvidenceReader reader, long capture, string run)
    {
        try
        {
            reader.ReadTraces(capture);
        }
        catch (EvidenceException error)
        {
            Report(run, "trace", error.Message);
        }
    }

    private static string Hash(byte[] bytes) => Convert.ToHexStringLower(SHA256.HashData(bytes));
}
