using System.Text;

namespace BenchRunner.Evidence.Schemas;

/// <summary>What the database itself refuses, whoever writes to it: changes, deletions, replacements, late rows,
/// mixtures.</summary>
/// <remarks>
/// A blob can be written past a trigger and a trigger can be dropped; the seals find both. The triggers are there so
/// that nothing is lost by mistake.
/// </remarks>
internal static class Triggers
{
    /// <summary>Whether the run of a new row's capture is sealed.</summary>
    public const string CaptureIsSealed =
        "exists (select 1 from capture c join seal s on s.run = c.run and s.kind = 'run' where c.id = new.capture)";

    /// <summary>Statements that make the triggers.</summary>
    public static string Sql { get; } = Build();

    /// <summary>Triggers that keep every row of tables as it is.</summary>
    public static string Keeping(IEnumerable<(string Table, string[][] Keys)> tables)
    {
        StringBuilder sql = new();
        foreach ((string table, string[][] keys) in tables)
        {
            KeepRows(sql, table, keys);
        }

        return sql.ToString();
    }

    /// <summary>A trigger that takes no more rows into a table once what they belong to is sealed.</summary>
    /// <param name="table">The table.</param>
    /// <param name="closed">Whether the new row's is.</param>
    /// <param name="whole">What is sealed, e.g. <c>run</c>.</param>
    public static string Ending(string table, string closed, string whole) => $"""
        create trigger {table}_ends_with_the_seal before insert on {table} when {closed}
        begin select raise(abort, 'the {whole} is sealed: no row of {table} is added'); end;

        """;

    private static string Build()
    {
        const string sealedRun = "exists (select 1 from seal where kind = 'run' and run = new.run)";
        StringBuilder sql = new(Keeping(Tables.AppendOnly));
        foreach ((string table, string closed) in ((string, string)[])
            [
                ("run_file", sealedRun), ("instrument", sealedRun), ("event", sealedRun), ("capture", sealedRun),
                ("decision", "new.scoring = 0 and " + sealedRun), ("measurement", "new.scoring = 0 and " + sealedRun),
                ("trace", CaptureIsSealed), ("payload", CaptureIsSealed),
                ("verdict", "new.scoring = 0 and " + CaptureIsSealed),
                ("capture_value", "new.scoring = 0 and " + CaptureIsSealed),
            ])
        {
            sql.Append(Ending(table, closed, "run"));
        }

        sql.Append("""
            create trigger run_is_of_the_kind_of_the_file before insert on run
            when (select simulated from run order by id limit 1) <> new.simulated
            begin select raise(abort, 'simulated and measured runs never share a file'); end;

            """);
        return sql.ToString();
    }

    private static void KeepRows(StringBuilder sql, string table, string[][] keys)
    {
        // "insert or replace" deletes without firing the trigger on deletion, so an insert over a key is refused too.
        static string Same(string[] key) => string.Join(" and ", key.Select(column => $"{column} = new.{column}"));
        string taken = string.Join(" or ", keys.Select(key => $"exists (select 1 from {table} where {Same(key)})"));
        sql.Append($"""
            create trigger {table}_is_never_deleted before delete on {table}
            begin select raise(abort, 'evidence is append-only: no row of {table} is deleted'); end;
            create trigger {table}_is_never_changed before update on {table}
            begin select raise(abort, 'evidence is append-only: no row of {table} is changed'); end;
            create trigger {table}_is_never_replaced before insert on {table} when {taken}
            begin select raise(abort, 'evidence is append-only: no row of {table} is replaced'); end;

            """);
    }
}
