using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Tests;

/// <summary>A folder of its own for one test, removed at the end, with an evidence file to be made in it.</summary>
internal sealed class EvidenceFolder : IDisposable
{
    public EvidenceFolder() => Folder = Directory.CreateTempSubdirectory("evidence-tests-").FullName;

    public string Folder { get; }

    public string File => Path.Combine(Folder, "bench-evidence.db");

    /// <summary>Reads by plain SQL on a connection of its own, as any other program would.</summary>
    public List<object?[]> Rows(string sql)
    {
        using SqliteConnection connection = Connect(SqliteOpenMode.ReadOnly);
        using SqliteCommand command = connection.CreateCommand();
        command.CommandText = sql;
        using SqliteDataReader reader = command.ExecuteReader();
        List<object?[]> rows = [];
        while (reader.Read())
        {
            object?[] row = new object?[reader.FieldCount];
            for (int i = 0; i < row.Length; i++)
            {
                row[i] = reader.IsDBNull(i) ? null : reader.GetValue(i);
            }

            rows.Add(row);
        }

        return rows;
    }

    public object? Value(string sql) => Rows(sql) is [[var value, ..], ..] ? value : null;

    /// <summary>Writes past the store, as somebody with another tool would.</summary>
    public void Write(string sql)
    {
        using SqliteConnection connection = Connect(SqliteOpenMode.ReadWrite);
        using SqliteCommand command = connection.CreateCommand();
        command.CommandText = sql;
        command.ExecuteNonQuery();
    }

    public SqliteConnection Connect(SqliteOpenMode mode)
    {
        SqliteConnection connection = new(
            new SqliteConnectionStringBuilder { DataSource = File, Mode = mode, Pooling = false }.ToString());
        connection.Open();
        return connection;
    }

    public void Dispose() => Directory.Delete(Folder, recursive: true);
}
