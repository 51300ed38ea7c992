namespace FakeBench.Faults;

/// <summary>One fault that was asked for.</summary>
/// <param name="Name">Its name.</param>
/// <param name="Begins">When it begins.</param>
public sealed record Fault(string Name, Moment Begins)
{
    private static readonly string[] _roles = ["supply", "pulser", "scope", "voltmeter", "interlock", "hotplate"];

    /// <summary>Reads <c>name</c> or <c>name@when</c>; the name of a link's fault may begin with the role:
    /// <c>supply/garbage@volts:200</c>.</summary>
    /// <exception cref="FormatException">No such fault, or no such moment.</exception>
    public static Fault Parse(string text)
    {
        ArgumentNullException.ThrowIfNull(text);
        string[] parts = text.Split('@', 2);
        string[] words = parts[0].Split('/', 2);
        FaultKind kind = FaultCatalogue.All.FirstOrDefault(k => k.Name == words[^1])
            ?? throw new FormatException($"no fault is called '{parts[0]}'; 'faults' lists them");
        if (words.Length == 2 && (kind.Role is null || !_roles.Contains(words[0])))
        {
            throw new FormatException(kind.Role is null
                ? $"'{kind.Name}' is no fault of a link; leave '{words[0]}/' out"
                : $"'{words[0]}' is no role; expected {string.Join(", ", _roles)}");
        }

        Moment begins = parts.Length == 1
            ? kind.Begins
            : Moment.Parse(parts[1]) ?? throw new FormatException(
                $"'{parts[1]}' is no moment; expected fire:N, volts:V, seconds:S or block:N");
        string? role = words.Length == 2 ? words[0] : kind.Role;
        return new Fault(role is null ? kind.Name : LinkFault.Of(role, kind.Name), begins);
    }
}
