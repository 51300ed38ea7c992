using BenchRunner.Evidence.Queries;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests.Queries;

public sealed class FreeSqlTests(SixRuns six) : IClassFixture<SixRuns>
{
    [Theory]
    [InlineData("select device, outcome from device_outcomes", 8)]
    [InlineData("with recursive n(i) as (select 1 union all select i + 1 from n where i < 5) select i from n", 5)]
    [InlineData("select json_extract(findings, '$[0].criterion') from captures where valid = 0", 7)]
    [InlineData("select * from measurements m join device_outcomes d using (run)", 12)]
    [InlineData("select 1 where false", 0)]
    [InlineData("select name from sqlite_schema where type = 'view'", 12)]
    [InlineData("explain query plan select * from captures", null)]
    [InlineData("select 1; -- with a remark", 1)]
    public void Reading_is_answered(string sql, int? rows)
    {
        QueryTable table = Ask(sql);
        Assert.NotEmpty(table.Columns);
        Assert.Equal(rows ?? table.Rows.Count, table.Rows.Count);
    }

    [Theory]
    [InlineData("delete from run")]
    [InlineData("insert into word (text) values ('x')")]
    [InlineData("update decision set outcome = 'accepted'")]
    [InlineData("create table t (x)")]
    [InlineData("create temp table t (x)")]
    [InlineData("create temp view v as select 1")]
    [InlineData("drop view lot_yield")]
    [InlineData("attach 'other.db' as o")]
    [InlineData("attach ':memory:' as o")]
    [InlineData("pragma query_only = off")]
    [InlineData("pragma user_version")]
    [InlineData("pragma journal_mode = delete")]
    [InlineData("select load_extension('x')")]
    [InlineData("vacuum into 'copy.db'")]
    [InlineData("begin")]
    [InlineData("savepoint s")]
    [InlineData("reindex")]
    [InlineData("analyze")]
    [InlineData("with n as (select 1) delete from run")]
    [InlineData("select 1; delete from run")]
    [InlineData("select 1; select 2")]
    [InlineData("")]
    [InlineData("-- nothing")]
    [InlineData("selekt 1")]
    [InlineData("select * from nowhere")]
    [InlineData("select $device")]
    public void All_else_is_refused_in_words_and_changes_nothing(string sql)
    {
        byte[] before = File.ReadAllBytes(six.File);
        string message = Assert.Throws<QueryException>(() => Ask(sql)).Message;
        Assert.StartsWith("the SQL ", message, StringComparison.Ordinal);
        Assert.Equal(before, File.ReadAllBytes(six.File));
        Assert.False(File.Exists("copy.db") || File.Exists("other.db"));
    }

    [Fact]
    public async Task A_question_without_end_ends_with_its_token()
    {
        const string endless = "with recursive n(i) as (select 1 union all select i + 1 from n) select count(*) from n";
        CancellationToken test = TestContext.Current.CancellationToken;
        using CancellationTokenSource limit = CancellationTokenSource.CreateLinkedTokenSource(test);
        Task<QueryTable> asking = Task.Run(() => QueryRunner.RunSql(six.File, endless, limit.Token), test);
        await limit.CancelAsync();
        await Assert.ThrowsAnyAsync<OperationCanceledException>(() => asking);
    }

    [Fact]
    public void It_reads_beside_a_writer()
    {
        using EvidenceFolder folder = new();
        using EvidenceStore store = EvidenceStore.Open(folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header("W1200-0002"));
        run.AddCapture(Samples.Capture(1));
        QueryTable table = QueryRunner.RunSql(
            folder.File, "select count(*) from captures", TestContext.Current.CancellationToken);
        Assert.Equal(1L, table.Rows[0][0]);
    }

    private QueryTable Ask(string sql) => QueryRunner.RunSql(six.File, sql, TestContext.Current.CancellationToken);
}
