namespace BenchRunner.Evidence.Queries;

/// <summary>A question that is asked often, by name.</summary>
/// <param name="Name">Name, e.g. <c>device-history</c>.</param>
/// <param name="Question">The question in one line.</param>
/// <param name="Filters">What narrows it.</param>
/// <param name="Sql">The SQL; <see cref="Marker"/> stands where conditions of filters go.</param>
public sealed record NamedQuery(string Name, string Question, IReadOnlyList<QueryFilter> Filters, string Sql)
{
    /// <summary>Where in the SQL the conditions of the given filters go.</summary>
    public const string Marker = "/* filters */";

    /// <summary>The SQL with the conditions of the filters that are given.</summary>
    /// <param name="given">Names of the filters that are given.</param>
    public string SqlWith(IReadOnlyCollection<string> given)
    {
        IEnumerable<string> clauses = Filters
            .Where(filter => filter.Clause.Length > 0 && given.Contains(filter.Name))
            .Select(filter => " and " + filter.Clause);
        return Sql.Replace(Marker, string.Concat(clauses), StringComparison.Ordinal);
    }
}
