using System.Threading.Channels;
using BenchRunner.Instruments.Roles;
using BenchRunner.Safety.Guardians;
using BenchRunner.Signals.Units;

namespace BenchRunner.Safety.Tests.Guardians;

/// <summary>Runner, pipe and instruments as the guardian's logic sees them; notes in which order it touches them.</summary>
internal sealed class GuardedDouble : IBeatSource, IRunnerKiller, IVoltmeter
{
    private readonly Channel<Heard> _beats = Channel.CreateUnbounded<Heard>();
    private readonly List<string> _did = [];

    /// <summary>What the voltmeter shows; NaN: it is silent.</summary>
    public double Volts { get; set; }

    public InstrumentIdentity Identity => throw new NotSupportedException();

    /// <summary>What was done, in its order.</summary>
    public IReadOnlyList<string> Did
    {
        get
        {
            lock (_did)
            {
                return [.. _did];
            }
        }
    }

    public SafeableRoles Roles => new(Part("pulser"), Part("supply"), Part("bleeder"), this);

    public void Beat(HeardKind kind, double volts = 600) => _beats.Writer.TryWrite(new Heard(kind, volts, volts, volts));

    public Task<Heard> Next() => _beats.Reader.ReadAsync().AsTask();

    public Task<string?> End()
    {
        Note("runner ended");
        return Task.FromResult<string?>(null);
    }

    public Task<Volts> Read(CancellationToken cancel) => double.IsNaN(Volts)
        ? Task.FromException<Volts>(new TimeoutException("silent")) : Task.FromResult(new Volts(Volts));

    public ISafeable Part(string role) => new Safeable(role, this);

    private void Note(string what)
    {
        lock (_did)
        {
            _did.Add(what);
        }
    }

    private sealed class Safeable(string role, GuardedDouble owner) : ISafeable
    {
        public string Role => role;

        public Task MakeSafe(CancellationToken cancel)
        {
            owner.Note(role);
            return Task.CompletedTask;
        }
    }
}
