using System.Text.RegularExpressions;

namespace BenchRunner.Acceptance.Files;

/// <summary>Regular expressions from files: matched without backtracking, so that none can hang a run.</summary>
internal static class Expression
{
    private const RegexOptions Linear = RegexOptions.NonBacktracking | RegexOptions.CultureInvariant;

    // Matching is linear in the text; the bound is for expressions that are themselves enormous.
    private static readonly TimeSpan _patience = TimeSpan.FromSeconds(10);

    /// <summary>The expression that a whole text must match.</summary>
    /// <param name="pattern">The pattern as written.</param>
    /// <returns>The expression; null where the pattern is none, or needs backtracking.</returns>
    public static Regex? Of(string pattern)
    {
        try
        {
            // The pattern by itself first: "a)(b" becomes valid only between our own brackets.
            _ = new Regex(pattern, RegexOptions.CultureInvariant);
            return new Regex($@"\A(?:{pattern})\z", Linear, _patience);
        }
        catch (Exception wrong) when (wrong is ArgumentException or NotSupportedException)
        {
            return null;
        }
    }

    /// <summary>Whether a whole text matches; a match that takes too long is none.</summary>
    public static bool Holds(string pattern, string text)
    {
        try
        {
            return Of(pattern)?.IsMatch(text) ?? false;
        }
        catch (RegexMatchTimeoutException)
        {
            return false;
        }
    }
}
