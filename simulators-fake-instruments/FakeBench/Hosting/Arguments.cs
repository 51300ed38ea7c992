using System.Globalization;
using FakeBench.Faults;
using FakeBench.Fixtures;

namespace FakeBench.Hosting;

/// <summary>Reads the arguments of <c>serve</c>.</summary>
public static class Arguments
{
    private const int LongestSerial = 64;

    /// <summary>Reads them.</summary>
    /// <exception cref="FormatException">An argument is wrong; the message says which and what was
    /// expected.</exception>
    public static ServeOptions Parse(IReadOnlyList<string> arguments)
    {
        ArgumentNullException.ThrowIfNull(arguments);
        var options = new ServeOptions();
        var faults = new List<Fault>();
        for (int i = 0; i < arguments.Count; i++)
        {
            string name = arguments[i];
            if (Flag(options, name) is { } flagged)
            {
                options = flagged;
                continue;
            }

            string value = i + 1 < arguments.Count
                ? arguments[++i]
                : throw new FormatException($"{name}: unknown, or its value is missing");
            if (name == "--fault")
            {
                faults.Add(Fault.Parse(value));
            }
            else
            {
                options = Set(options, name, value);
            }
        }

        foreach (Fault fault in faults)
        {
            if (fault.Name.Split('/') is [{ } role, { } name] && LinkFault.Misfit(name, options.LinkOf(role)) is { } why)
            {
                throw new FormatException($"--fault {fault.Name}: {why}");
            }
        }

        return options with { Faults = faults };
    }

    private static ServeOptions? Flag(ServeOptions options, string name) => name switch
    {
        "--ends-with-input" => options with { EndsWithInput = true },
        "--say-states" => options with { SayStates = true },
        "--sound" => options with { Sound = true },
        "--hotplate" => options with { Hotplate = true },
        _ => null,
    };

    private static ServeOptions Set(ServeOptions options, string name, string value) => name switch
    {
        "--device" => options with { Device = Serial(name, value) },
        "--companion" => options with { Companion = Serial(name, value) },
        "--load" => options with { LoadToNegative = Either(name, value, "positive", "negative") },
        "--exchange" => options with { ByHand = Either(name, value, "none", "by-hand") },
        "--seed" => options with { Seed = (int)Number(name, value, int.MinValue, int.MaxValue) },
        "--pace" => options with { Pace = Number(name, value, 1, 5) },
        "--ambient" => options with { Ambient = Number(name, value, -20, 60) },
        "--bits" => options with
        {
            Bits = value is "8" or "12"
            ? (int)Number(name, value, 8, 12) : throw Wrong(name, value, "8 or 12")
        },
        "--channels" => options with { Channels = Channels(value) },
        "--links" => options with { Hislip = Either(name, value, "tcp", "hislip") },
        "--interlock" => options with { SerialInterlock = IsSerial(name, value) },
        "--write-bench" => options with { WriteBench = value },
        _ => throw new FormatException($"{name}: no such option; see --help"),
    };

    private static double Number(string name, string value, double lowest, double highest) =>
        double.TryParse(value, NumberStyles.Float, CultureInfo.InvariantCulture, out double number)
            && number >= lowest && number <= highest
            ? number
            : throw Wrong(
                name, value, string.Create(CultureInfo.InvariantCulture, $"a number from {lowest} to {highest}"));

    private static string Serial(string name, string value) =>
        value.Length is > 0 and <= LongestSerial && value.All(
            c => char.IsAsciiLetterOrDigit(c) || c is '.' or '_' or '-')
            ? value
            : throw Wrong(name, value, "1 to 64 letters, digits, dots, dashes, underscores");

    // Whether it is the second of two words.
    private static bool Either(string name, string value, string first, string second) =>
        value == second || (value == first ? false : throw Wrong(name, value, $"{first} or {second}"));

    private static bool IsSerial(string name, string value) => value switch
    {
        "tcp" => false,
        "serial" when PseudoTerminal.IsSupported => true,
        _ => throw Wrong(name, value, PseudoTerminal.IsSupported ? "serial or tcp" : "tcp"),
    };

    private static string[] Channels(string value)
    {
        string[] channels = value.Split(',');
        if (channels.Distinct().Count() < channels.Length)
        {
            throw Wrong("--channels", value, "each channel once");
        }

        foreach (string channel in channels)
        {
            _ = BenchProbes.Of(channel);
        }

        return channels;
    }

    private static FormatException Wrong(string name, string value, string expected) =>
        new($"{name}: '{value}'; expected {expected}");
}
