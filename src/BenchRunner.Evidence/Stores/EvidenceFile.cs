using BenchRunner.Evidence.Schemas;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Stores;

/// <summary>Makes an evidence file or opens one, and finds what is wrong with it before anything is written.</summary>
internal static class EvidenceFile
{
    public static SqlSession OpenToWrite(string path, TimeProvider time, long? largestBytes)
    {
        SqlSession session = SqlSession.Open(path, SqliteOpenMode.ReadWriteCreate);
        try
        {
            bool isNew = session.Number("select count(*) from sqlite_schema") == 0
                && session.Number("pragma user_version") == 0;
            int version = isNew ? 0 : session.CheckForm(path);
            if (isNew)
            {
                session.Run($"pragma page_size = {Schema.PageSize};");
            }

            // The mode is asked for and read back: where it is refused, a crash could cost what was announced.
            if (session.Value("pragma journal_mode = wal") is not "wal")
            {
                throw new EvidenceException(
                    $"{path}: its disk allows no write-ahead log; name a file on another disk.");
            }

            // On macOS alone a plain fsync may stay in the drive's cache; elsewhere fullfsync changes nothing.
            session.Run("pragma synchronous = full; pragma fullfsync = on; pragma checkpoint_fullfsync = on;");
            if (largestBytes is { } largest)
            {
                session.Run($"pragma max_page_count = {Math.Max(1, largest / session.Number("pragma page_size"))};");
            }

            if (isNew)
            {
                Make(session, time);
            }
            else if (version < Schema.Version)
            {
                // One transaction: a writer that is ended meanwhile leaves the file in its old form, whole.
                session.Run(
                    $"begin immediate; {Schema.Upgrade(version)} pragma user_version = {Schema.Version}; commit;");
            }

            return session;
        }
        catch
        {
            session.Dispose();
            throw;
        }
    }

    private static void Make(SqlSession session, TimeProvider time)
    {
        session.Run("begin immediate");
        session.Run(Schema.Sql());
        session.Execute(
            "insert into origin (uid, created_at) values (?1, ?2)",
            Guid.CreateVersion7(time.GetUtcNow()).ToString("D"), Text.Time(time.GetUtcNow()));
        session.Run($"pragma application_id = {Schema.ApplicationId}; pragma user_version = {Schema.Version};");
        session.Run("commit");
    }
}
