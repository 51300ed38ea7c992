namespace BenchRunner.Runner.Sessions;

/// <summary>A closing of the enclosure, for which a person is asked.</summary>
/// <param name="Device">Serial of the device in the fixture.</param>
/// <param name="Simulated">Whether the bench is simulated: then the cautions are shown and nothing is asked.</param>
/// <param name="SeenOpen">Whether the enclosure was seen open in this session: then a name given beforehand confirms
/// nothing.</param>
/// <param name="Clamps">Channels whose current clamps a person must degauss first, by name: the scope
/// cannot.</param>
public sealed record Closing(string Device, bool Simulated, bool SeenOpen, IReadOnlyList<string> Clamps);
