using System.Diagnostics;
using System.Globalization;
using System.Runtime.InteropServices;
using System.Text.Json;
using System.Text.Json.Nodes;

namespace BenchRunner.Benchmarks;

/// <summary>The general-purpose program beside ours: a child running Python with numpy and scipy, one thread.</summary>
/// <remarks>One order a line, one answer a line, so that its rounds alternate with ours. It ends when its input
/// ends.</remarks>
internal sealed class Peer : IDisposable
{
    private const string Python = "/usr/bin/python3";
    private static readonly TimeSpan _patience = TimeSpan.FromMinutes(2);

    private readonly Process? _process;

    private Peer(Process? process, string? missing)
    {
        _process = process;
        Missing = missing;
    }

    /// <summary>What has to be installed, by its apt package; null: nothing.</summary>
    public string? Missing { get; }

    /// <summary>Starts the child.</summary>
    public static Peer Start()
    {
        if (!File.Exists(Python))
        {
            return new Peer(null, "the peer needs the apt packages python3, python3-numpy, python3-scipy");
        }

        ProcessStartInfo start = new(Python)
        {
            ArgumentList = { "-u", Path.Combine(AppContext.BaseDirectory, "peers", "worker.py") },
            RedirectStandardInput = true,
            RedirectStandardOutput = true,
        };
        foreach (string name in (string[])["OPENBLAS_NUM_THREADS", "OMP_NUM_THREADS", "MKL_NUM_THREADS"])
        {
            start.Environment[name] = "1";
        }

        start.Environment["PYTHONDONTWRITEBYTECODE"] = "1";
        Process process = Process.Start(start)!;
        Peer peer = new(process, null);
        string[] absent = [.. peer.Answer()["missing"]!.AsArray().Select(name => name!.GetValue<string>())];
        if (absent.Length == 0)
        {
            return peer;
        }

        peer.Dispose();
        return new Peer(null, $"the peer needs the apt package{(absent.Length > 1 ? "s" : "")} "
            + string.Join(", ", absent));
    }

    /// <summary>Hands a work over.</summary>
    /// <param name="work">Name by which it is run.</param>
    /// <param name="kind">Which program of the peer does it.</param>
    /// <param name="order">What it needs to know; changed.</param>
    /// <param name="data">Samples that go over in a file, which is gone when this returns; empty: none.</param>
    /// <exception cref="PeerException">The peer failed.</exception>
    public void Load(string work, string kind, JsonObject order, ReadOnlySpan<byte> data)
    {
        order["do"] = "load";
        order["work"] = work;
        order["kind"] = kind;
        string file = Path.GetTempFileName();
        try
        {
            File.WriteAllBytes(file, data);
            order["file"] = file;
            Ask(order);
        }
        finally
        {
            File.Delete(file);
        }
    }

    /// <summary>Numbers as the peer reads them: little-endian, one after the other.</summary>
    public static ReadOnlySpan<byte> Bytes<T>(ReadOnlySpan<T> numbers)
        where T : struct => MemoryMarshal.AsBytes(numbers);

    /// <summary>A loaded work, to be timed.</summary>
    /// <param name="work">Its name.</param>
    public Rounds.Work Run(string work) => calls =>
    {
        JsonObject answer = Ask(new JsonObject { ["do"] = "run", ["work"] = work, ["count"] = calls });
        return new Spent(answer["seconds"]!.GetValue<double>(), answer["least"]!.GetValue<double>());
    };

    /// <summary>The values that a loaded work gives; those that cannot be formed are left out.</summary>
    /// <param name="work">Its name.</param>
    /// <exception cref="PeerException">The peer failed.</exception>
    public Dictionary<string, double> Result(string work)
    {
        JsonObject values = Ask(new JsonObject { ["do"] = "result", ["work"] = work })["values"]!.AsObject();
        return values.Where(value => value.Value is not null)
            .ToDictionary(value => value.Key, value => value.Value!.GetValue<double>());
    }

    /// <summary>Ends the child.</summary>
    public void Dispose()
    {
        if (_process is null)
        {
            return;
        }

        _process.StandardInput.Close();
        if (!_process.WaitForExit(_patience))
        {
            _process.Kill();
        }

        _process.Dispose();
    }

    private JsonObject Ask(JsonObject order)
    {
        _process!.StandardInput.WriteLine(order.ToJsonString());
        _process.StandardInput.Flush();
        JsonObject answer = Answer();
        return answer["error"] is { } error ? throw new PeerException(error.GetValue<string>()) : answer;
    }

    private JsonObject Answer()
    {
        Task<string?> line = _process!.StandardOutput.ReadLineAsync();
        if (!line.Wait(_patience))
        {
            _process.Kill();
            throw new PeerException(string.Create(
                CultureInfo.InvariantCulture, $"no answer within {_patience.TotalSeconds} s"));
        }

        try
        {
            return JsonNode.Parse(line.Result ?? throw new PeerException("it ended"))!.AsObject();
        }
        catch (JsonException)
        {
            throw new PeerException($"it answered: {line.Result}");
        }
    }
}
