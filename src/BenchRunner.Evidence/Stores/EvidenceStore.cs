using System.Collections.Concurrent;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Evidence.Entries;
using BenchRunner.Evidence.Notes;
using BenchRunner.Evidence.Placements;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Stores;

/// <summary>The evidence: an SQLite file that takes runs and never changes what it took. One writer, any
/// readers.</summary>
/// <remarks>
/// <para>Invariants:</para>
/// <list type="number">
/// <item>A capture that <see cref="RunWriter.AddCapture"/> announced is in the file, whatever happens next.</item>
/// <item>A run has an end (decision and seal) or none; there is no half of one.</item>
/// <item>A row under the seal is never changed, deleted or replaced; a sealed run grows no more. Triggers refuse it,
/// seals find it.</item>
/// <item>Each seal holds a hash of all that its run stored, and the seal before it within its origin.</item>
/// <item>Simulated and measured runs never share a file.</item>
/// <item>One process writes: it holds <c>FILE-writer</c>, and only it closes a run that has no end.</item>
/// <item>The first failed write latches: every later one throws the same reason, until the file is opened
/// again.</item>
/// <item>A reader never waits for the writer and never sees a part of a transaction.</item>
/// <item>What comes after a run is an entry with a seal of its own in the same chain; it changes no row of the
/// run.</item>
/// <item>A file of an older format is brought to this one by adding alone: its runs keep their rows and
/// seals.</item>
/// </list>
/// <para>What it assumes of the disk: a completed fsync is durable; before it, any page of a write may be there, not
/// there, or torn; a page that was durable stays as it was, unless the seal says otherwise. A lock of the file system
/// dies with its process. The file does not lie on a network share.</para>
/// <para>States: open, then failed (for good) or closed. A run: begun, then ended; a run that is begun when the file is
/// opened is ended as <c>stopped</c>. Thread-safe.</para>
/// </remarks>
public sealed class EvidenceStore : IDisposable
{
    private const int MostWaiting = 1000;

    private readonly string _path;
    private readonly TimeProvider _time;
    private readonly WriterLock _lock;
    private readonly SqlSession _session;
    private readonly Lock _gate = new();
    private readonly ConcurrentQueue<Action<SqlSession>> _waiting = new();
    private EvidenceException? _failure;

    private EvidenceStore(string path, TimeProvider time, WriterLock writerLock, SqlSession session)
    {
        _path = path;
        _time = time;
        _lock = writerLock;
        _session = session;
    }

    /// <summary>Runs that had no end when the file was opened, now closed as <c>stopped</c>; oldest first.</summary>
    public IReadOnlyList<ClosedRun> Closed { get; private set; } = [];

    /// <summary>Opens an evidence file for writing, or makes it; closes runs that have no end.</summary>
    /// <param name="path">The file; its folder must exist.</param>
    /// <param name="time">The clock.</param>
    /// <param name="largestBytes">Size beyond which the file counts as full, bytes; null: the disk decides.</param>
    /// <exception cref="EvidenceException">Another writer holds it; it is no evidence file, newer, damaged or cut
    /// short; it cannot be written.</exception>
    public static EvidenceStore Open(string path, TimeProvider time, long? largestBytes = null)
    {
        ArgumentException.ThrowIfNullOrEmpty(path);
        ArgumentNullException.ThrowIfNull(time);
        string full = Path.GetFullPath(path);
        if (!Directory.Exists(Path.GetDirectoryName(full)))
        {
            throw new EvidenceException($"{path}: its folder does not exist; make it or name another file.");
        }

        if (Directory.Exists(full))
        {
            throw new EvidenceException($"{path}: is a folder; name a file.");
        }

        if (OwnFile.LinkTarget(full) is { } target)
        {
            throw new EvidenceException($"{path}: is a symbolic link to {target}; name the file itself.");
        }

        WriterLock writerLock = WriterLock.Take(full, time);
        SqlSession? session = null;
        try
        {
            OwnFile.Make(full);
            session = EvidenceFile.OpenToWrite(full, time, largestBytes);
            EvidenceStore store = new(full, time, writerLock, session);
            store.Closed = store.CloseUnfinished();
            return store;
        }
        catch (Exception error)
        {
            session?.Dispose();
            writerLock.Dispose();
            if (error is SqliteException or IOException or UnauthorizedAccessException)
            {
                throw EvidenceFault.Explain(full, error);
            }

            throw;
        }
    }

    /// <summary>Whether a run may begin.</summary>
    /// <param name="header">The run.</param>
    /// <returns>Why not; null where it may. Attempts that were stopped count neither as decided nor as
    /// attempts.</returns>
    /// <exception cref="EvidenceException">The file cannot be read, or a write has failed.</exception>
    public RunRefusal? Refuses(RunHeader header)
    {
        ArgumentNullException.ThrowIfNull(header);
        return Guarded(() => RunRules.Refusal(_session, header));
    }

    /// <summary>Begins a run, durably.</summary>
    /// <param name="header">What is known of it.</param>
    /// <returns>Its writer.</returns>
    /// <exception cref="RunRefusedException"><see cref="Refuses"/> says why.</exception>
    /// <exception cref="EvidenceException">It is not begun; the store takes nothing more.</exception>
    public RunWriter BeginRun(RunHeader header)
    {
        ArgumentNullException.ThrowIfNull(header);
        lock (_gate)
        {
            if (Refuses(header) is { } refusal)
            {
                throw new RunRefusedException(refusal);
            }

            string uid = NewIdentity();
            int attempt = Guarded(() => RunRules.Attempt(_session, header));

            // The reason belongs to a device that was decided before, however the reason came to be given.
            bool decided = Guarded(() => RunRules.IsDecided(_session, header));
            RunHeader kept = decided ? header : header with { Again = null };
            long row = Commit(to => RunRows.Begin(to, kept, uid, attempt, Now()));
            return new RunWriter(this, row, uid, attempt);
        }
    }

    /// <summary>Adds what became of a device after its runs, durably and under a seal of its own.</summary>
    /// <param name="note">The note.</param>
    /// <returns>Its identity, time and seal.</returns>
    /// <exception cref="NoteRefusedException">Name or reason is empty or too long, or the device has no run in the lot;
    /// nothing is stored.</exception>
    /// <exception cref="EvidenceException">It is not stored; the store takes nothing more.</exception>
    public SealedEntry AddNote(Note note)
    {
        ArgumentNullException.ThrowIfNull(note);
        lock (_gate)
        {
            if (Guarded(() => NoteRules.Refusal(_session, note)) is { } refusal)
            {
                throw new NoteRefusedException(refusal);
            }

            return AddEntry(EntryRows.NoteKind, note.By, (to, entry) => EntryRows.Note(to, entry, note));
        }
    }

    /// <summary>Adds where a device that was not accepted was put, durably and under a seal of its own.</summary>
    /// <param name="placement">The placement; its run is in this file.</param>
    /// <returns>Its identity, time and seal.</returns>
    /// <exception cref="ArgumentException">Place or name is empty or too long, or the run is not in the file; nothing
    /// is stored.</exception>
    /// <exception cref="EvidenceException">It is not stored; the store takes nothing more.</exception>
    public SealedEntry AddPlacement(Placement placement)
    {
        ArgumentNullException.ThrowIfNull(placement);
        lock (_gate)
        {
            return Guarded(() => PlacementRules.Refusal(_session, placement)) is { } refusal
                ? throw new ArgumentException(refusal, nameof(placement))
                : AddEntry(
                    EntryRows.PlacementKind, placement.By, (to, entry) => EntryRows.Placement(to, entry, placement));
        }
    }

    /// <summary>Closes the file; a run without an end stays so, and is closed by the next writer.</summary>
    public void Dispose()
    {
        lock (_gate)
        {
            try
            {
                if (!_waiting.IsEmpty)
                {
                    Commit(_ => 0);
                }
            }
            catch (EvidenceException)
            {
                // Its run has no end either, and the next writer says so.
            }

            _session.Dispose();
            _lock.Dispose();
        }
    }

    /// <summary>Adds an entry with its content and seals it, in one transaction.</summary>
    internal SealedEntry AddEntry(string kind, string author, Action<SqlSession, long> content) =>
        Commit(to => EntryRows.Add(to, kind, author, NewIdentity(), Now(), content));

    internal string Now() => Text.Time(_time.GetUtcNow());

    internal void RefuseWhenFailed()
    {
        if (Volatile.Read(ref _failure) is { } failure)
        {
            throw new EvidenceException(failure.Message, failure.InnerException);
        }
    }

    /// <summary>Leaves rows for the next commit; the 1,000th brings one about.</summary>
    internal void Wait(Action<SqlSession> rows)
    {
        RefuseWhenFailed();
        _waiting.Enqueue(rows);
        if (_waiting.Count >= MostWaiting)
        {
            Commit(_ => 0);
        }
    }

    /// <summary>Runs a transaction, rows that wait first; when it fails, nothing of it is stored and the store
    /// latches.</summary>
    internal T Commit<T>(Func<SqlSession, T> rows)
    {
        lock (_gate)
        {
            return Guarded(() =>
            {
                _session.Run("begin immediate");
                while (_waiting.TryDequeue(out Action<SqlSession>? waiting))
                {
                    waiting(_session);
                }

                T result = rows(_session);
                _session.Run("commit");
                return result;
            });
        }
    }

    private string NewIdentity() => Guid.CreateVersion7(_time.GetUtcNow()).ToString("D");

    private T Guarded<T>(Func<T> work)
    {
        lock (_gate)
        {
            RefuseWhenFailed();
            try
            {
                return work();
            }
            catch (Exception error)
            {
                // Whatever it was, rows that waited may be lost: the file is right, and ends, at the last commit.
                Volatile.Write(ref _failure, EvidenceFault.Explain(_path, error));
                RollBack();
                throw _failure!;
            }
        }
    }

    private void RollBack()
    {
        try
        {
            _session.Run("rollback");
        }
        catch (SqliteException)
        {
            // SQLite has rolled back by itself (full disk, failed disk), or nothing was begun.
        }
    }

    private List<ClosedRun> CloseUnfinished()
    {
        const string unfinished = """
            select r.id, r.uid, r.device, r.started_at, (select count(*) from capture c where c.run = r.id)
            from run r where not exists (select 1 from seal s where s.run = r.id and s.kind = 'run') order by r.id
            """;
        List<(long Row, ClosedRun Run)> open = _session.Read(unfinished, row => (
            row.GetInt64(0), new ClosedRun(row.GetString(1), row.GetString(2), row.GetString(3), row.GetInt32(4))));
        foreach ((long row, ClosedRun run) in open)
        {
            string reason = $"the program ended before the run did; captures kept: {run.Captures}";
            Commit(to =>
            {
                RunRows.Event(
                    to, row, new BenchEvent(_time.GetUtcNow(), "evidence", Severity.Error, "run-closed", reason));
                return RunRows.End(to, row, Outcome.Stopped, reason, Now());
            });
        }

        return [.. open.Select(found => found.Run)];
    }
}
