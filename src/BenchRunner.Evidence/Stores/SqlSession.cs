using BenchRunner.Evidence.Schemas;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Stores;

/// <summary>A connection with prepared statements that are used again; one thread at a time.</summary>
/// <param name="connection">The open connection, owned from here on.</param>
internal sealed class SqlSession(SqliteConnection connection) : IDisposable
{
    private readonly Dictionary<string, SqliteCommand> _commands = [];

    public SqliteConnection Connection => connection;

    /// <summary>Opens a file; nothing of its content is read yet.</summary>
    public static SqlSession Open(string path, SqliteOpenMode mode)
    {
        SqliteConnection connection = new(new SqliteConnectionStringBuilder
        {
            DataSource = path,
            Mode = mode,
            Pooling = false,
            ForeignKeys = true,
            DefaultTimeout = 5,
        }.ToString());
        SqlSession session = new(connection);
        try
        {
            connection.Open();
            session.Run("pragma trusted_schema = off; pragma cell_size_check = on; pragma recursive_triggers = on;");
            return session;
        }
        catch
        {
            session.Dispose();
            throw;
        }
    }

    /// <summary>Opens an evidence file for reading alone and checks that it is one.</summary>
    /// <exception cref="EvidenceException">There is no such file, it is none of ours, newer, or damaged.</exception>
    public static SqlSession OpenToRead(string path)
    {
        if (!File.Exists(path))
        {
            throw new EvidenceException($"{path}: no such evidence file; name one that a run has written.");
        }

        SqlSession? session = null;
        try
        {
            session = Open(path, SqliteOpenMode.ReadOnly);
            if (session.CheckForm(path) < Schema.Version)
            {
                session.Run("pragma temp_store = memory;" + Additions.OfReader);
            }

            session.Run("pragma query_only = on;");
            return session;
        }
        catch (SqliteException error)
        {
            session?.Dispose();
            throw EvidenceFault.Explain(path, error);
        }
        catch
        {
            session?.Dispose();
            throw;
        }
    }

    /// <summary>Checks that the file is an evidence file of a version this program reads.</summary>
    /// <returns>Its version.</returns>
    /// <exception cref="EvidenceException">It is not.</exception>
    public int CheckForm(string path)
    {
        long application = Number("pragma application_id");
        if (application != Schema.ApplicationId)
        {
            throw new EvidenceException($"{path}: is a database, but not an evidence file; name another file.");
        }

        long version = Number("pragma user_version");
        return version is >= Schema.OldestVersion and <= Schema.Version
            ? (int)version
            : throw new EvidenceException(
                $"{path}: has format {version}, and this program knows formats {Schema.OldestVersion} to "
                    + $"{Schema.Version}; use the program that wrote it.");
    }

    /// <summary>Runs statements that are not used again.</summary>
    public void Run(string sql)
    {
        using SqliteCommand command = connection.CreateCommand();
        command.CommandText = sql;
        command.ExecuteNonQuery();
    }

    /// <summary>Runs a prepared statement whose parameters are <c>?1</c>, <c>?2</c> …</summary>
    public void Execute(string sql, params ReadOnlySpan<object?> values) => Bind(sql, values).ExecuteNonQuery();

    /// <summary>Inserts a row and returns its rowid.</summary>
    public long Insert(string sql, params ReadOnlySpan<object?> values)
    {
        Execute(sql, values);
        return Number("select last_insert_rowid()");
    }

    /// <summary>The first column of the first row, or null.</summary>
    public object? Value(string sql, params ReadOnlySpan<object?> values) =>
        Bind(sql, values).ExecuteScalar() is { } found and not DBNull ? found : null;

    /// <summary>The first column of the first row as a whole number; 0 where there is none.</summary>
    public long Number(string sql, params ReadOnlySpan<object?> values) =>
        Value(sql, values) is long number ? number : 0;

    /// <summary>Reads all rows.</summary>
    public List<T> Read<T>(string sql, Func<SqliteDataReader, T> row, params ReadOnlySpan<object?> values)
    {
        List<T> rows = [];
        using SqliteDataReader reader = Bind(sql, values).ExecuteReader();
        while (reader.Read())
        {
            rows.Add(row(reader));
        }

        return rows;
    }

    /// <summary>The id of a text in <c>word</c>, which is entered where it is new; null for null.</summary>
    public object? Word(string? text)
    {
        if (text is null)
        {
            return null;
        }

        return Value("select id from word where text = ?1", text)
            ?? Insert("insert into word (text) values (?1)", text);
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        foreach (SqliteCommand command in _commands.Values)
        {
            command.Dispose();
        }

        connection.Dispose();
    }

    private SqliteCommand Bind(string sql, ReadOnlySpan<object?> values)
    {
        if (!_commands.TryGetValue(sql, out SqliteCommand? command))
        {
            command = connection.CreateCommand();
            command.CommandText = sql;
            _commands.Add(sql, command);
        }

        command.Parameters.Clear();
        for (int i = 0; i < values.Length; i++)
        {
            command.Parameters.AddWithValue($"?{i + 1}", values[i] ?? DBNull.Value);
        }

        return command;
    }
}
