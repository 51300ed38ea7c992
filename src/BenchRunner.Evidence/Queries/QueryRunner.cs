using System.Globalization;
using BenchRunner.Evidence.Stores;
using Microsoft.Data.Sqlite;
using SQLitePCL;

namespace BenchRunner.Evidence.Queries;

/// <summary>Asks an evidence file; nothing here can write to it.</summary>
public static class QueryRunner
{
    /// <summary>Most rows of an answer; a question with more has to be narrowed.</summary>
    public const int MostRows = 1_000_000;

    // Virtual-machine instructions between two looks at the token: well under a millisecond.
    private const int InstructionsBetweenLooks = 10_000;

    /// <summary>Asks a named question.</summary>
    /// <param name="path">The evidence file.</param>
    /// <param name="name">Name of the question.</param>
    /// <param name="filters">Filter to value, e.g. <c>device</c> to <c>W1200-0001</c>.</param>
    /// <param name="cancel">Ends the question; a time limit is a token that ends by itself.</param>
    /// <exception cref="QueryException">No such file, question or filter; a filter missing or of a wrong
    /// form.</exception>
    /// <exception cref="EvidenceException">The file cannot be read.</exception>
    /// <exception cref="OperationCanceledException">It was cancelled.</exception>
    public static QueryTable Run(
        string path, string name, IReadOnlyDictionary<string, string> filters, CancellationToken cancel = default)
    {
        ArgumentNullException.ThrowIfNull(filters);
        NamedQuery query = NamedQueries.Find(name);
        Dictionary<string, object> values = Values(query, filters);
        return Ask(path, query.SqlWith(values.Keys), values, cancel);
    }

    /// <summary>Asks by free SQL: one SELECT. Writing, ATTACH, PRAGMA and extensions are refused.</summary>
    /// <param name="path">The evidence file.</param>
    /// <param name="sql">The SQL.</param>
    /// <param name="cancel">Ends the question; a time limit is a token that ends by itself.</param>
    /// <exception cref="QueryException">No such file; the SQL is wrong, does more than read, or gives too many
    /// rows.</exception>
    /// <exception cref="EvidenceException">The file cannot be read.</exception>
    /// <exception cref="OperationCanceledException">It was cancelled.</exception>
    public static QueryTable RunSql(string path, string sql, CancellationToken cancel = default) =>
        Ask(path, sql, new Dictionary<string, object>(), cancel);

    private static Dictionary<string, object> Values(NamedQuery query, IReadOnlyDictionary<string, string> given)
    {
        string known = string.Join(", ", query.Filters.Select(filter => "--" + filter.Name));
        foreach (string name in given.Keys.Except(query.Filters.Select(filter => filter.Name)))
        {
            throw new QueryException($"{query.Name} has no filter --{name}; it has {known}.");
        }

        Dictionary<string, object> values = [];
        foreach (QueryFilter filter in query.Filters)
        {
            if (given.TryGetValue(filter.Name, out string? text))
            {
                values.Add(filter.Name, filter.IsCount ? Count(filter, text) : text);
            }
            else if (filter.Default is { } fallback)
            {
                values.Add(filter.Name, fallback);
            }
            else if (filter.Required)
            {
                throw new QueryException($"{query.Name} needs --{filter.Name} ({filter.Meaning}).");
            }
        }

        return values;
    }

    private static long Count(QueryFilter filter, string text) =>
        long.TryParse(text, NumberStyles.None, CultureInfo.InvariantCulture, out long count)
            && count is > 0 and <= MostRows
            ? count
            : throw new QueryException($"--{filter.Name} is '{text}'; give a whole number from 1 to {MostRows}.");

    private static QueryTable Ask(
        string path, string sql, Dictionary<string, object> values, CancellationToken cancel)
    {
        if (!File.Exists(path))
        {
            throw new QueryException($"{path}: there is no such evidence file; name one that a run has written.");
        }

        cancel.ThrowIfCancellationRequested();
        using SqlSession session = SqlSession.OpenToRead(path);
        sqlite3 database = session.Connection.Handle!;
        raw.sqlite3_set_authorizer(database, Authorize, null);
        raw.sqlite3_progress_handler(
            database, InstructionsBetweenLooks, _ => cancel.IsCancellationRequested ? 1 : 0, null);
        try
        {
            using SqliteCommand command = session.Connection.CreateCommand();
            command.CommandText = sql;
            foreach ((string name, object value) in values)
            {
                command.Parameters.AddWithValue("$" + name, value);
            }

            return Read(command, cancel);
        }
        catch (SqliteException error)
        {
            throw Explain(path, error, cancel);
        }
        catch (InvalidOperationException error)
        {
            throw new QueryException($"the SQL has parameters; write the values instead ({error.Message}).", error);
        }
    }

    private static QueryTable Read(SqliteCommand command, CancellationToken cancel)
    {
        using SqliteDataReader reader = command.ExecuteReader();
        if (reader.FieldCount == 0)
        {
            throw new QueryException("the SQL asks nothing; write one SELECT.");
        }

        string[] columns = [.. Enumerable.Range(0, reader.FieldCount).Select(reader.GetName)];
        List<IReadOnlyList<object?>> rows = [];
        while (reader.Read())
        {
            cancel.ThrowIfCancellationRequested();
            if (rows.Count == MostRows)
            {
                throw new QueryException($"the answer has more than {MostRows} rows; narrow the question.");
            }

            object?[] row = new object?[columns.Length];
            for (int i = 0; i < row.Length; i++)
            {
                row[i] = reader.IsDBNull(i) ? null : reader.GetValue(i);
            }

            rows.Add(row);
        }

        return reader.NextResult()
            ? throw new QueryException("the SQL has several statements; write one SELECT.")
            : new QueryTable(columns, rows);
    }

    private static int Authorize(object user, int action, string first, string second, string database, string inner) =>
        action switch
        {
            raw.SQLITE_SELECT or raw.SQLITE_READ or raw.SQLITE_RECURSIVE => raw.SQLITE_OK,
            raw.SQLITE_FUNCTION when !string.Equals(second, "load_extension", StringComparison.OrdinalIgnoreCase) =>
                raw.SQLITE_OK,
            _ => raw.SQLITE_DENY,
        };

    private static Exception Explain(string path, SqliteException error, CancellationToken cancel)
    {
        switch (error.SqliteErrorCode)
        {
            case raw.SQLITE_INTERRUPT:
                return new OperationCanceledException("the question was ended before its answer.", error, cancel);
            case raw.SQLITE_AUTH or raw.SQLITE_READONLY:
                return new QueryException("the SQL does more than read; write one SELECT.", error);
            case raw.SQLITE_ERROR or raw.SQLITE_TOOBIG or raw.SQLITE_MISMATCH or raw.SQLITE_RANGE:
                return new QueryException($"the SQL is wrong: {error.Message}", error);
            default:
                return EvidenceFault.Explain(path, error);
        }
    }
}
