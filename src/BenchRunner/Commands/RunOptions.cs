using System.CommandLine;

namespace BenchRunner.Commands;

/// <summary>The options of <c>run</c>.</summary>
internal sealed class RunOptions
{
    private readonly Argument<string> _sequence = new("sequence") { Description = "the sequence file" };

    private readonly Option<string[]> _devices = new("--device")
    {
        Description = "serial of the device; may repeat; - reads serials from standard input (a bar-code reader)",
        Required = true,
        AllowMultipleArgumentsPerToken = false,
    };

    private readonly Option<string?> _lot = new("--lot") { Description = "lot of the devices" };
    private readonly Option<string?> _bench = CommonOptions.Bench();
    private readonly Option<string?> _evidence = CommonOptions.Evidence();
    private readonly Option<string?> _operator = new("--operator")
    {
        Description = "who operates the bench; required on a real one",
    };

    private readonly Option<string?> _armedBy = new("--armed-by")
    {
        Description =
            "who has confirmed, on the bench itself, that it may be energised; for a bench without a terminal",
    };

    private readonly Option<string?> _companion = new("--companion")
    {
        Description = "serial of the device in the other place",
    };
    private readonly Option<string?> _again = new("--again")
    {
        Description = "why a device that was decided in its lot is measured again",
    };
    private readonly Option<bool> _json = CommonOptions.Json();

    public void AddTo(Command command)
    {
        command.Add(_sequence);
        foreach (Option option in (Option[])
            [_devices, _lot, _bench, _evidence, _operator, _armedBy, _companion, _again, _json])
        {
            command.Add(option);
        }
    }

    public RunArguments From(ParseResult parsed) => new(
        parsed.GetRequiredValue(_sequence), parsed.GetRequiredValue(_devices), parsed.GetValue(_lot),
        parsed.GetValue(_bench), parsed.GetValue(_evidence), parsed.GetValue(_operator), parsed.GetValue(_armedBy),
        parsed.GetValue(_companion), parsed.GetValue(_again), parsed.GetValue(_json));
}
