using BenchRunner.Acceptance.Events;

namespace BenchRunner.Console;

/// <summary>Colours beside words, never in place of them; none where there is no terminal or NO_COLOR is set.</summary>
internal sealed class Palette(bool on)
{
    private const string Reset = "\u001b[0m";

    public string Good(string text) => Paint("\u001b[1;32m", text);

    public string Bad(string text) => Paint("\u001b[1;31m", text);

    public string Open(string text) => Paint("\u001b[1;33m", text);

    public string Faint(string text) => Paint("\u001b[2m", text);

    public string Of(Severity severity, string text) => severity switch
    {
        Severity.Alarm or Severity.Error => Bad(text),
        Severity.Warning => Open(text),
        Severity.Detail => Faint(text),
        _ => text,
    };

    private string Paint(string colour, string text) => on ? colour + text + Reset : text;
}
