using System.Diagnostics;
using System.Globalization;
using System.Text;
using System.Text.Encodings.Web;
using System.Text.Json;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Evidence.Stores;

/// <summary>The words and forms in which the evidence keeps what is no number.</summary>
internal static class Text
{
    private static readonly JsonWriterOptions Readable =
        new() { Encoder = JavaScriptEncoder.UnsafeRelaxedJsonEscaping };

    /// <summary>A time as UTC ISO 8601 text with milliseconds, so that text order is time order.</summary>
    public static string Time(DateTimeOffset at) =>
        at.UtcDateTime.ToString("yyyy-MM-dd'T'HH:mm:ss.fff'Z'", CultureInfo.InvariantCulture);

    public static string Of(Outcome outcome) => outcome switch
    {
        Outcome.Accepted => "accepted",
        Outcome.Rejected => "rejected",
        Outcome.Undecided => "undecided",
        Outcome.NotMeasured => "not-measured",
        Outcome.Stopped => "stopped",
        _ => throw new UnreachableException(),
    };

    public static string? Of(Conformity? conformity) => conformity switch
    {
        null => null,
        Conformity.Conforms => "conforms",
        Conformity.Fails => "fails",
        Conformity.Undecided => "undecided",
        _ => throw new UnreachableException(),
    };

    public static string Of(Severity severity) => severity switch
    {
        Severity.Detail => "detail",
        Severity.Information => "information",
        Severity.Warning => "warning",
        Severity.Error => "error",
        Severity.Alarm => "alarm",
        _ => throw new UnreachableException(),
    };

    public static string Of(DeviceKind kind) => kind switch
    {
        DeviceKind.Mosfet => "mosfet",
        DeviceKind.Igbt => "igbt",
        DeviceKind.Diode => "diode",
        _ => throw new UnreachableException(),
    };

    public static string Of(DevicePosition position) => position switch
    {
        DevicePosition.Low => "low",
        DevicePosition.High => "high",
        DevicePosition.Both => "both",
        _ => throw new UnreachableException(),
    };

    /// <summary>Findings as a JSON array of objects with the members that <c>analyse --json</c> has.</summary>
    public static string Findings(IReadOnlyList<Finding> findings) => Json(json =>
    {
        foreach (Finding finding in findings)
        {
            json.WriteStartObject();
            json.WriteString("criterion", finding.Criterion);
            json.WriteString("class", Of(finding.Class));
            json.WriteString("channel", finding.Channel?.Name());
            Number(json, "seen", finding.Seen);
            Number(json, "bound", finding.Bound);
            Number(json, "at", finding.At);
            json.WriteString("message", finding.Message);
            json.WriteEndObject();
        }
    });

    /// <summary>Words as a JSON array.</summary>
    public static string Words(IReadOnlyList<string> words) => Json(json =>
    {
        foreach (string word in words)
        {
            json.WriteStringValue(word);
        }
    });

    private static string Of(FindingClass kind) => kind switch
    {
        FindingClass.Warn => "warn",
        FindingClass.Retry => "retry",
        FindingClass.Stop => "stop",
        _ => throw new UnreachableException(),
    };

    private static void Number(Utf8JsonWriter json, string name, double? value)
    {
        // JSON has no infinity: what a criterion saw may be one, and the message says so in words.
        if (value is { } number && double.IsFinite(number))
        {
            json.WriteNumber(name, number);
        }
        else
        {
            json.WriteNull(name);
        }
    }

    private static string Json(Action<Utf8JsonWriter> items)
    {
        using MemoryStream bytes = new();
        using (Utf8JsonWriter json = new(bytes, Readable))
        {
            json.WriteStartArray();
            items(json);
            json.WriteEndArray();
        }

        return Encoding.UTF8.GetString(bytes.ToArray());
    }
}
