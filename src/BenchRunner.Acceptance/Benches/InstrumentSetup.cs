using System.Globalization;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Benches;

/// <summary>How one role's instrument is reached.</summary>
/// <param name="Link">Its link: <c>tcp 127.0.0.1:5025</c>, <c>tcp [::1]:5025</c> or <c>serial /dev/ttyUSB0</c>.</param>
/// <param name="Dialect">Name of its dialect, e.g. <c>generic-supply</c>.</param>
/// <param name="Connections">Clients that it serves at once, from 1.</param>
/// <param name="At">Where it is connected; the voltmeter must be at <c>bank</c>; null elsewhere.</param>
/// <param name="Where">Where it stands in the file.</param>
public sealed record InstrumentSetup(string Link, string Dialect, int Connections, string? At, Place Where)
{
    /// <summary>What a link must look like; the port's size is checked besides.</summary>
    internal const string LinkPattern = @"tcp ([A-Za-z0-9.-]{1,200}|\[[0-9A-Fa-f:.]{2,45}\]):[0-9]{1,5}|serial [^ ]{1,150}";

    /// <summary>The link of the interlock of a bench that <c>run</c> starts: it says itself where it is.</summary>
    internal const string AutomaticSerial = "serial auto";

    /// <summary>Host (without brackets) and port of a TCP link; null for a serial one. Port 0: <c>run</c> finds it.</summary>
    public (string Host, int Port)? Tcp
    {
        get
        {
            if (!Link.StartsWith("tcp ", StringComparison.Ordinal))
            {
                return null;
            }

            int colon = Link.LastIndexOf(':');
            return (Link[4..colon].Trim('[', ']'), int.Parse(Link.AsSpan(colon + 1), NumberStyles.None, CultureInfo.InvariantCulture));
        }
    }

    /// <summary>Device of a serial link, <c>auto</c> where <c>run</c> finds it; null for a TCP one.</summary>
    public string? SerialDevice => Link.StartsWith("serial ", StringComparison.Ordinal) ? Link[7..] : null;
}
