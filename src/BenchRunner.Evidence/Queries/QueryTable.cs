namespace BenchRunner.Evidence.Queries;

/// <summary>An answer: columns and rows. A value is a <see cref="long"/>, <see cref="double"/>, <see cref="string"/>,
/// array of bytes, or null; numbers are plain SI.</summary>
/// <param name="Columns">Names of the columns.</param>
/// <param name="Rows">The rows, each with a value a column.</param>
public sealed record QueryTable(IReadOnlyList<string> Columns, IReadOnlyList<IReadOnlyList<object?>> Rows);
