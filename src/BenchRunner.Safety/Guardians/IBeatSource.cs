namespace BenchRunner.Safety.Guardians;

/// <summary>Where the guardian hears its runner from: a pipe that nobody else can write to.</summary>
public interface IBeatSource
{
    /// <summary>Waits for what comes next. After <see cref="HeardKind.Ended"/> nothing comes any more.</summary>
    /// <remarks>Never throws for what comes or does not: what cannot be read has ended.</remarks>
    Task<Heard> Next();
}
