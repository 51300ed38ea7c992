namespace BenchRunner.Files;

/// <summary>A bar-code reader, or whoever types in its place.</summary>
internal interface ISerialReader
{
    /// <summary>The next serial of the right form; null where no more will come.</summary>
    Task<string?> Next(CancellationToken cancel);

    /// <summary>Serials that came before they were asked for.</summary>
    IReadOnlyList<string> Waiting { get; }
}
