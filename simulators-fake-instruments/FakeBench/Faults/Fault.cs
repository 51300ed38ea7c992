namespace FakeBench.Faults;

/// <summary>One fault that was asked for.</summary>
/// <param name="Name">Its name.</param>
/// <param name="Begins">When it begins.</param>
public sealed record Fault(string Name, Moment Begins)
{
    /// <summary>Reads <c>name</c> or <c>name@when</c>.</summary>
    /// <exception cref="FormatException">No such fault, or no such moment.</exception>
    public static Fault Parse(string text)
    {
        ArgumentNullException.ThrowIfNull(text);
        string[] parts = text.Split('@', 2);
        FaultKind kind = FaultCatalogue.All.FirstOrDefault(k => k.Name == parts[0])
            ?? throw new FormatException($"no fault is called '{parts[0]}'; 'faults' lists them");
        Moment begins = parts.Length == 1
            ? kind.Begins
            : Moment.Parse(parts[1]) ?? throw new FormatException(
                $"'{parts[1]}' is no moment; expected fire:N, volts:V, seconds:S or block:N");
        return new Fault(kind.Name, begins);
    }
}
