using System.Globalization;

namespace BenchRunner.Instruments.Links;

/// <summary>Where an instrument is, as the bench file says it.</summary>
/// <param name="Kind">How it is reached.</param>
/// <param name="Host">Host name or address, or the path of the serial port.</param>
/// <param name="Number">TCP port, or the serial line's speed, baud.</param>
/// <param name="SubAddress">The device behind a HiSLIP server; null on other links.</param>
public sealed record LinkAddress(LinkKind Kind, string Host, int Number, string? SubAddress = null)
{
    /// <summary>The port of a HiSLIP server where the bench file names none.</summary>
    public const int DefaultHislipPort = 4880;

    /// <summary>The device behind a HiSLIP server where the bench file names none.</summary>
    public const string DefaultSubAddress = "hislip0";

    /// <summary>Speed of a serial line where the bench file names none, baud.</summary>
    public const int DefaultBaud = 115_200;

    // IVI-6.1, 6.1: at most 256 bytes.
    private const int LongestSubAddress = 256;

    private const string Forms =
        "write 'tcp HOST PORT', 'tcp HOST:PORT', 'hislip HOST[:PORT][/SUBADDRESS]' or 'serial PATH [BAUD]'";

    /// <summary>Reads <c>tcp 127.0.0.1 5025</c>, <c>tcp 127.0.0.1:5025</c>, <c>tcp [::1]:5025</c>, <c>hislip
    /// scope.lab[:4880][/hislip0]</c>, <c>serial /dev/ttyUSB0 [9600]</c>.</summary>
    /// <exception cref="FormatException">None of these; the message says what was found and what to write.</exception>
    public static LinkAddress Parse(string text) => TryParse(text, out var address, out var problem)
        ? address
        : throw new FormatException(problem);

    /// <summary>Reads an address, as <see cref="Parse"/> does.</summary>
    /// <param name="text">What the bench file says.</param>
    /// <param name="address">The address, where it is one.</param>
    /// <param name="problem">What was found and what to write, where it is none.</param>
    public static bool TryParse(
        string text,
        [System.Diagnostics.CodeAnalysis.NotNullWhen(true)] out LinkAddress? address,
        [System.Diagnostics.CodeAnalysis.NotNullWhen(false)] out string? problem)
    {
        ArgumentNullException.ThrowIfNull(text);
        var words = text.Split(' ', StringSplitOptions.RemoveEmptyEntries | StringSplitOptions.TrimEntries);
        address = words switch
        {
            ["tcp", var host, var port] => Tcp(host, port),
            ["tcp", var both] when both.LastIndexOf(':') is > 0 and var colon =>
                Tcp(both[..colon], both[(colon + 1)..]),
            ["hislip", var both] => Hislip(both),
            ["serial", var path] => new LinkAddress(LinkKind.Serial, path, DefaultBaud),
            ["serial", var path, var baud] when Whole(baud, 10_000_000) is { } speed and > 0 =>
                new LinkAddress(LinkKind.Serial, path, speed),
            _ => null,
        };
        problem = address is null ? $"'{text}' is no link; {Forms}" : null;
        return address is not null;
    }

    /// <summary>The address as a bench file says it.</summary>
    public override string ToString() => Kind switch
    {
        LinkKind.Tcp => string.Create(CultureInfo.InvariantCulture, $"tcp {Host} {Number}"),
        LinkKind.Hislip => string.Create(
            CultureInfo.InvariantCulture,
            $"hislip {(Host.Contains(':', StringComparison.Ordinal) ? $"[{Host}]" : Host)}:{Number}")
            + (SubAddress == DefaultSubAddress ? "" : $"/{SubAddress}"),
        _ when Number == DefaultBaud => $"serial {Host}",
        _ => string.Create(CultureInfo.InvariantCulture, $"serial {Host} {Number}"),
    };

    private static LinkAddress? Tcp(string host, string port) =>
        Whole(port, ushort.MaxValue) is { } number && host.Length > 0
            ? new LinkAddress(LinkKind.Tcp, host.Trim('[', ']'), number)
            : null;

    private static LinkAddress? Hislip(string text)
    {
        var slash = text.IndexOf('/', StringComparison.Ordinal);
        var (place, device) = slash < 0 ? (text, DefaultSubAddress) : (text[..slash], text[(slash + 1)..]);
        var isName = device.Length is > 0 and <= LongestSubAddress && device.All(c => c is > ' ' and <= '~');

        // The colons of a bare IPv6 address are its own: it has a port only behind brackets.
        var colon = place.EndsWith(']') ? -1 : place.LastIndexOf(':');
        var host = colon < 0 ? place : place[..colon];
        var port = colon < 0 ? DefaultHislipPort : Whole(place[(colon + 1)..], ushort.MaxValue);
        return port is { } number && host.Trim('[', ']') is { Length: > 0 } name && isName
            ? new LinkAddress(LinkKind.Hislip, name, number, device)
            : null;
    }

    private static int? Whole(string text, int most) =>
        int.TryParse(text, NumberStyles.None, CultureInfo.InvariantCulture, out var number) && number <= most
            ? number : null;
}
