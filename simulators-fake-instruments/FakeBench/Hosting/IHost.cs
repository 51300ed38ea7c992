namespace FakeBench.Hosting;

/// <summary>A link that an instrument is served on.</summary>
public interface IHost : IAsyncDisposable
{
    /// <summary>The link as a bench file writes it, e.g. <c>tcp 127.0.0.1 41001</c>.</summary>
    string Link { get; }

    /// <summary>Clients that are connected, as far as the link knows: a serial line does not.</summary>
    int Clients => 0;
}
