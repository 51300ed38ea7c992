using System.Globalization;
using System.Text;
using System.Xml;

namespace BenchRunner.Plots;

/// <summary>Writes a picture as plain SVG 1.1: shapes and text, no script, nothing from outside.</summary>
/// <remarks>Lengths are in pixels, from the upper left corner, rounded to a hundredth.</remarks>
internal sealed class Svg : IDisposable
{
    private const string Space = "http://www.w3.org/2000/svg";

    private readonly XmlWriter _xml;

    /// <summary>Begins a picture.</summary>
    /// <param name="stream">Receives it, in UTF-8; not closed.</param>
    /// <param name="width">Its width.</param>
    /// <param name="height">Its height.</param>
    public Svg(Stream stream, double width, double height)
    {
        _xml = XmlWriter.Create(stream, new XmlWriterSettings
        {
            Encoding = new UTF8Encoding(encoderShouldEmitUTF8Identifier: false),
            Indent = true,
            IndentChars = " ",
            CloseOutput = false,
        });
        _xml.WriteStartElement("svg", Space);
        Attributes([
            ("version", "1.1"), ("width", Length(width)), ("height", Length(height)),
            ("viewBox", $"0 0 {Length(width)} {Length(height)}"), ("font-family", "sans-serif"), ("font-size", "11"),
        ]);
    }

    /// <summary>A length as the picture writes it.</summary>
    public static string Length(double value) => value.ToString("0.##", CultureInfo.InvariantCulture);

    /// <summary>Opens a group; the caller closes it by <see cref="Close"/>.</summary>
    public void Open(string name, params ReadOnlySpan<(string Name, string Value)> attributes)
    {
        _xml.WriteStartElement(name, Space);
        Attributes(attributes);
    }

    /// <summary>Closes what <see cref="Open"/> opened last.</summary>
    public void Close() => _xml.WriteEndElement();

    /// <summary>An element without content.</summary>
    public void Shape(string name, params ReadOnlySpan<(string Name, string Value)> attributes)
    {
        Open(name, attributes);
        Close();
    }

    /// <summary>A straight line.</summary>
    public void Line(double x1, double y1, double x2, double y2, string stroke, string kind, string? dashes = null)
    {
        Open("line", ("class", kind), ("x1", Length(x1)), ("y1", Length(y1)), ("x2", Length(x2)), ("y2", Length(y2)),
            ("stroke", stroke));
        if (dashes is not null)
        {
            Attributes([("stroke-dasharray", dashes)]);
        }

        Close();
    }

    /// <summary>A text at its baseline.</summary>
    /// <param name="x">Where its anchor lies.</param>
    /// <param name="y">Its baseline.</param>
    /// <param name="text">The text; characters that XML cannot hold are replaced.</param>
    /// <param name="kind">Its class.</param>
    /// <param name="anchor"><c>start</c>, <c>middle</c> or <c>end</c>.</param>
    /// <param name="more">Further attributes.</param>
    public void Text(
        double x, double y, string text, string kind, string anchor = "start",
        params ReadOnlySpan<(string Name, string Value)> more)
    {
        Open("text", ("class", kind), ("x", Length(x)), ("y", Length(y)), ("text-anchor", anchor));
        Attributes(more);
        _xml.WriteString(Clean(text));
        Close();
    }

    /// <summary>Ends the picture.</summary>
    public void Dispose()
    {
        _xml.WriteEndDocument();
        _xml.Dispose();
    }

    private void Attributes(ReadOnlySpan<(string Name, string Value)> attributes)
    {
        foreach ((string name, string value) in attributes)
        {
            _xml.WriteAttributeString(name, Clean(value));
        }
    }

    /// <summary>A file's name may hold anything; XML may not.</summary>
    private static string Clean(string text)
    {
        StringBuilder clean = new(text.Length);
        foreach (Rune rune in text.EnumerateRunes())
        {
            bool known = rune.Value > 0xFFFF || (XmlConvert.IsXmlChar((char)rune.Value) && rune.Value >= ' ');
            clean.Append(known ? rune.ToString() : "\uFFFD");
        }

        return clean.ToString();
    }
}
