namespace BenchRunner.Instruments.Links;

/// <summary>A link to an instrument failed: refused, lost, late, or what came is no reply.</summary>
public sealed class LinkException : Exception
{
    /// <summary>Makes the exception.</summary>
    /// <param name="link">The link as the bench file names it, e.g. <c>tcp 127.0.0.1 5025</c>.</param>
    /// <param name="message">What happened and what to do.</param>
    /// <param name="inner">What the system said, if anything.</param>
    public LinkException(string link, string message, Exception? inner = null)
        : base($"{link}: {message}", inner) => Link = link;

    /// <summary>The link as the bench file names it.</summary>
    public string Link { get; }
}
