namespace BenchRunner.Evidence.Queries;

/// <summary>What narrows a named question; its value is a parameter of the SQL, never a part of its text.</summary>
/// <param name="Name">Name, e.g. <c>device</c> for <c>--device</c>.</param>
/// <param name="Meaning">What it means, in one line.</param>
/// <param name="Clause">The condition that it adds where it is given; empty: the SQL has the parameter already.</param>
/// <param name="Required">Whether the question cannot be asked without it.</param>
/// <param name="Default">Value where it is not given, of a filter that is a number of rows; null: none.</param>
public sealed record QueryFilter(
    string Name, string Meaning, string Clause = "", bool Required = false, long? Default = null)
{
    /// <summary>Whether its value is a whole number of rows, from 1.</summary>
    public bool IsCount => Default is not null;
}
