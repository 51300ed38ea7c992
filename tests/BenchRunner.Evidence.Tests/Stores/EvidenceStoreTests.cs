using BenchRunner.Acceptance.Decisions;
using BenchRunner.Evidence.Audits;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Queries;
using BenchRunner.Evidence.Stores;
using Microsoft.Data.Sqlite;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Evidence.Tests.Stores;

public sealed class EvidenceStoreTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void A_new_file_is_an_empty_evidence_file_with_a_log_ahead()
    {
        Open().Dispose();
        Assert.Equal(2L, _folder.Value("pragma user_version"));
        Assert.Equal(8192L, _folder.Value("pragma page_size"));
        Assert.Equal("wal", _folder.Value("pragma journal_mode"));
        Assert.Single(_folder.Rows("select * from origin"));
    }

    [Fact]
    public void Run_identities_are_UUIDs_of_version_7_that_follow_the_clock()
    {
        FakeTimeProvider clock = Samples.Clock();
        using EvidenceStore store = EvidenceStore.Open(_folder.File, clock);
        List<string> runs = [];
        for (int i = 0; i < 5; i++)
        {
            clock.Advance(TimeSpan.FromMilliseconds(1));
            RunWriter run = store.BeginRun(Samples.Header());
            run.Stop("enough");
            runs.Add(run.Run);
        }

        Assert.All(runs, run => Assert.Equal(7, Guid.Parse(run).Version));
        Assert.Equal(runs.Order(StringComparer.Ordinal), runs);
        // RFC 9562, 5.7: the first 48 bits are milliseconds since 1970.
        Assert.Equal(
            clock.GetUtcNow().ToUnixTimeMilliseconds(),
            Convert.ToInt64(runs[^1].Replace("-", "", StringComparison.Ordinal)[..12], 16));
    }

    [Fact]
    public void A_second_writer_is_refused_and_told_who_writes()
    {
        using (Open())
        {
            EvidenceException refused = Assert.Throws<EvidenceException>(Open);
            string holder = $"process {Environment.ProcessId} since 2026-03-02T08:00:00.000Z";
            Assert.Contains(holder, refused.Message, StringComparison.Ordinal);
        }

        Open().Dispose();
    }

    [Fact]
    public void A_text_file_is_refused_and_left_as_it_was()
    {
        string text = string.Concat(Enumerable.Repeat("t,vds_low,id_low\n", 200));
        File.WriteAllText(_folder.File, text);
        Assert.Contains("is not an evidence file", Refused(), StringComparison.Ordinal);
        Assert.Equal(text, File.ReadAllText(_folder.File));
    }

    [Fact]
    public void Another_programs_database_is_refused_and_left_as_it_was()
    {
        using (SqliteConnection other = _folder.Connect(SqliteOpenMode.ReadWriteCreate))
        {
            using SqliteCommand command = other.CreateCommand();
            command.CommandText = "create table birds (name text)";
            command.ExecuteNonQuery();
        }

        byte[] before = File.ReadAllBytes(_folder.File);
        Assert.Contains("not an evidence file", Refused(), StringComparison.Ordinal);
        Assert.Equal(before, File.ReadAllBytes(_folder.File));
    }

    [Fact]
    public void A_newer_format_is_refused_by_writer_reader_audit_and_question()
    {
        Open().Dispose();
        _folder.Write("pragma user_version = 99");
        CancellationToken test = TestContext.Current.CancellationToken;
        string[] refusals =
        [
            Refused(),
            Assert.Throws<EvidenceException>(() => EvidenceReader.Open(_folder.File)).Message,
            Assert.Throws<EvidenceException>(() => EvidenceAudit.Verify(_folder.File, cancel: test)).Message,
            Assert.Throws<EvidenceException>(() => QueryRunner.RunSql(_folder.File, "select 1", test)).Message,
        ];
        Assert.All(refusals, refusal => Assert.Contains("has format 99", refusal, StringComparison.Ordinal));
    }

    [Fact]
    public void An_empty_file_becomes_an_evidence_file()
    {
        // What a writer leaves that was ended while it made the file.
        File.WriteAllBytes(_folder.File, []);
        Open().Dispose();
        Assert.Equal(2L, _folder.Value("pragma user_version"));
    }

    [Theory]
    [InlineData(0.9)]
    [InlineData(0.5)]
    [InlineData(0.05)]
    public void A_file_that_was_cut_short_is_refused(double kept)
    {
        using (EvidenceStore store = Open())
        {
            Samples.WholeRun(store, Samples.Header());
        }

        using (FileStream file = File.OpenWrite(_folder.File))
        {
            file.SetLength((long)(file.Length * kept));
        }

        Assert.Contains("is damaged or cut short", Refused(), StringComparison.Ordinal);
    }

    [Fact]
    public void A_folder_that_is_missing_or_cannot_be_written_is_named()
    {
        string missing = Refused(Path.Combine(_folder.Folder, "no", "e.db"));
        Assert.Contains("its folder does not exist", missing, StringComparison.Ordinal);
        Assert.Contains("is a folder", Refused(_folder.Folder), StringComparison.Ordinal);
        Assert.SkipUnless(OperatingSystem.IsLinux(), "needs a folder in which even root cannot make a file");
        Assert.Contains("folder cannot be written", Refused("/proc/self/e.db"), StringComparison.Ordinal);
    }

    [Fact]
    public void A_file_too_small_for_its_tables_is_refused_as_full() =>
        Assert.Contains(
            "is full",
            Assert.Throws<EvidenceException>(() => EvidenceStore.Open(_folder.File, Samples.Clock(), 3 * 8192)).Message,
            StringComparison.Ordinal);

    [Fact]
    public void The_exact_bytes_of_a_file_are_stored_once_by_their_hash()
    {
        using EvidenceStore store = Open();
        Samples.WholeRun(store, Samples.Header("W1200-0001"));
        Samples.WholeRun(store, Samples.Header("W1200-0002"));
        Assert.Equal(4, _folder.Rows("select * from run_file").Count);
        // SHA-256 of "format: 1\n" by coreutils' sha256sum.
        Assert.Equal(
            "1f7b96350b268e336c5e28904d72911aee7f7e1db0f53f263667af74f3ebc23f",
            _folder.Value("select sha256 from content where id = 1"));
        Assert.Equal("format: 1\n"u8.ToArray(), _folder.Value("select bytes from content where id = 1"));
        Assert.Equal(2, _folder.Rows("select * from content").Count);
    }

    [Fact]
    public void Simulated_and_measured_runs_never_share_a_file()
    {
        using EvidenceStore store = Open();
        Samples.WholeRun(store, Samples.Header(simulated: true));
        RunHeader measured = Samples.Header("W1200-0002", simulated: false);
        Assert.Equal(RunRefusalKind.MixedOrigin, store.Refuses(measured)?.Kind);
        RunRefusedException refused = Assert.Throws<RunRefusedException>(() => store.BeginRun(measured));
        Assert.Equal(RunRefusalKind.MixedOrigin, refused.Refusal.Kind);
        SqliteException byHand = Assert.Throws<SqliteException>(() => _folder.Write(
            """
            insert into run (uid, origin, device, attempt, part, kind, position, sequence, sequence_revision,
              sequence_content, bench, simulated, algorithm, platform, started_at)
            select 'x', origin, device, attempt, part, kind, position, sequence, sequence_revision, sequence_content,
              bench, 0, algorithm, platform, started_at from run
            """));
        Assert.Contains("never share a file", byHand.Message, StringComparison.Ordinal);
        Assert.Null(store.Refuses(Samples.Header("W1200-0002", simulated: true)));
    }

    [Fact]
    public void A_device_decided_in_its_lot_needs_a_reason_and_has_so_many_attempts()
    {
        using EvidenceStore store = Open();
        RunHeader first = Samples.Header(lot: "L-1");
        Samples.WholeRun(store, first, Samples.Decision(Outcome.Undecided));
        Assert.Equal(RunRefusalKind.AlreadyDecided, store.Refuses(first)?.Kind);
        Assert.Equal(
            "W1200-0001 is undecided in lot L-1 already; say why it is measured again (--again REASON).",
            store.Refuses(first)?.Message);
        Assert.Equal(RunRefusalKind.AlreadyDecided, store.Refuses(first with { Again = "  " })?.Kind);
        Assert.Null(store.Refuses(Samples.Header(lot: "L-2")));
        Assert.Null(store.Refuses(Samples.Header("W1200-0002", "L-1")));

        RunHeader second = first with { Again = "contact was dirty" };
        RunWriter run = store.BeginRun(second);
        Assert.Equal(2, run.Attempt);
        run.Finish(Samples.Decision());
        Assert.Equal(RunRefusalKind.TooManyAttempts, store.Refuses(second)?.Kind);
        Assert.Equal(
            [["undecided", 0L], ["accepted", 1L]],
            _folder.Rows("select outcome, current from device_outcomes order by attempt"));
    }

    [Fact]
    public void A_device_whose_run_goes_on_gets_no_second_one_in_its_lot()
    {
        using EvidenceStore store = Open();
        RunWriter first = store.BeginRun(Samples.Header(lot: "L-1"));
        RunRefusal refusal = store.Refuses(Samples.Header(lot: "L-1", again: "in doubt"))!;
        Assert.Equal(
            (RunRefusalKind.InFlight, $"W1200-0001 has run {first.Run} in lot L-1 that has not ended; end it first."),
            (refusal.Kind, refusal.Message));
        Assert.Null(store.Refuses(Samples.Header("W1200-0002", "L-1")));
        first.Stop("enough");
        Assert.Null(store.Refuses(Samples.Header(lot: "L-1")));
    }

    [Fact]
    public void A_reason_to_measure_again_wants_a_lot_and_is_kept_only_where_something_was_decided()
    {
        using EvidenceStore store = Open();
        Assert.Equal(
            RunRefusalKind.AgainWithoutLot, store.Refuses(Samples.Header(again: "contact was dirty"))?.Kind);
        RunHeader header = Samples.Header(lot: "L-1", again: "contact was dirty");
        store.BeginRun(header).Stop("no bus");
        Samples.WholeRun(store, header);
        Samples.WholeRun(store, header);
        Assert.Equal([[null], [null], ["contact was dirty"]], _folder.Rows("select again from run order by attempt"));
    }

    [Fact]
    public void The_sequence_says_how_many_attempts_there_are()
    {
        using EvidenceStore store = Open();
        RunHeader header = Samples.Header(lot: "L-1", again: "doubt", sequence: Samples.Sequence(attempts: 3));
        for (int attempt = 1; attempt <= 3; attempt++)
        {
            Samples.WholeRun(store, header);
        }

        Assert.Equal(
            "W1200-0001 had 3 attempts in lot L-1, and the sequence allows 3; decide by what is there.",
            store.Refuses(header)?.Message);
    }

    [Fact]
    public void A_stopped_attempt_decides_nothing_and_uses_up_none()
    {
        using EvidenceStore store = Open();
        RunHeader header = Samples.Header(lot: "L-1");
        store.BeginRun(header).Stop("interlock opened");
        store.BeginRun(header).Stop("interlock opened");
        store.BeginRun(header).Finish(Samples.Decision(Outcome.Rejected));
        RunWriter again = store.BeginRun(header with { Again = "doubt" });
        Assert.Equal(4, again.Attempt);
        again.Stop("supply lost");
        Assert.Equal(
            [["stopped", 0L], ["stopped", 0L], ["rejected", 1L], ["stopped", 0L]],
            _folder.Rows("select outcome, current from device_outcomes order by attempt"));
        Assert.Equal([[1L, 0L, 1L, 0L, 0.0]], _folder.Rows(
            "select devices, accepted, rejected, stopped, first_pass_yield from lot_yield"));
    }

    [Fact]
    public void Without_a_lot_each_run_is_attempt_1_and_current()
    {
        using EvidenceStore store = Open();
        Samples.WholeRun(store, Samples.Header());
        Samples.WholeRun(store, Samples.Header());
        Assert.Equal([[1L, 1L], [1L, 1L]], _folder.Rows("select attempt, current from device_outcomes"));
        Assert.Empty(_folder.Rows("select * from lot_yield"));
    }

    [Fact]
    public async Task A_reader_beside_the_writer_never_sees_half_a_capture()
    {
        using EvidenceStore store = Open();
        using CancellationTokenSource done = new();
        Task<int> reading = Task.Run(() =>
        {
            int looks = 0;
            for (; !done.IsCancellationRequested || looks == 0; looks++)
            {
                Assert.Equal(0L, _folder.Value(
                    """
                    select count(*) from capture c
                    where not exists (select 1 from payload p where p.capture = c.id)
                      or 2 <> (select count(*) from trace t where t.capture = c.id)
                    """));
                Assert.Equal(0L, _folder.Value(
                    "select count(*) from decision d where not exists (select 1 from seal s where s.run = d.run)"));
            }

            return looks;
        }, TestContext.Current.CancellationToken);
        for (int i = 0; i < 20; i++)
        {
            Samples.WholeRun(store, Samples.Header($"W1200-{i:d4}"));
        }

        await done.CancelAsync();
        Assert.True(await reading > 0);
    }

    private EvidenceStore Open() => EvidenceStore.Open(_folder.File, Samples.Clock());

    private string Refused(string? path = null) =>
        Assert.Throws<EvidenceException>(() => EvidenceStore.Open(path ?? _folder.File, Samples.Clock())).Message;
}
