using System.Runtime.InteropServices;
using BenchRunner.Acceptance.Events;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Runner.Sessions;

/// <summary>The devices of a session, each once, and none that its lot refuses.</summary>
internal sealed class DeviceQueue(
    IDeviceSource source, RunRequest request, EvidenceStore store, EventSource events, string algorithm)
{
    private readonly HashSet<string> _seen = [];

    public IReadOnlyList<string> Waiting => source.Waiting;

    public bool FromReader => source.FromReader;

    /// <summary>Who acknowledges an outcome.</summary>
    public string Operator => string.IsNullOrWhiteSpace(request.Operator) ? "not stated" : request.Operator;

    /// <summary>Refuses devices of the command line before anything is opened or energised.</summary>
    /// <exception cref="RunRefusedException">A device is decided in its lot.</exception>
    public void RefuseKnown()
    {
        foreach (string device in source.FromReader ? [] : source.Waiting)
        {
            if (Refusal(device) is { } refusal)
            {
                throw new RunRefusedException(refusal);
            }
        }
    }

    /// <summary>The next device that may be run; null where there is none. From a reader, others are said and
    /// skipped.</summary>
    public async Task<string?> Next(CancellationToken cancel)
    {
        while (await source.Next(cancel) is { } device)
        {
            string? why = device == request.Companion ? "it is the companion in the other place"
                : !_seen.Add(device) ? "it was asked for in this session before" : Refusal(device)?.Message;
            if (why is null)
            {
                return device;
            }

            events.Say(Severity.Warning, "device-refused", $"{device} gets no run: {why}");
        }

        return null;
    }

    public RunHeader Header(string device, string? confirmedBy, bool simulated) => new()
    {
        Device = device,
        Lot = request.Lot,
        Sequence = request.Plan.Sequence,
        Bench = request.Plan.Bench.Name,
        Files = [request.Plan.Bench.Source, .. request.Dialects.Values.Select(dialect => dialect.Source)],
        Operator = request.Operator,
        ArmedBy = confirmedBy,
        Companion = request.Companion,
        Simulated = simulated,
        Again = request.Again,
        Algorithm = algorithm,
        Platform = $"{RuntimeInformation.RuntimeIdentifier} {RuntimeInformation.FrameworkDescription}",
    };

    // Whether the bench is simulated is known when its instruments are; the start of a run refuses a mixture.
    private RunRefusal? Refusal(string device) =>
        store.Refuses(Header(device, confirmedBy: null, request.Plan.Bench.Fake is not null)) is
        { Kind: not RunRefusalKind.MixedOrigin } refusal ? refusal : null;
}
