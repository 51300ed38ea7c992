using FakeBench.Faults;
using FakeBench.Fixtures;
using FakeBench.Scpi;

namespace FakeBench.Instruments;

/// <summary>A front panel: a state machine that obeys program messages. Threads and sockets are a host around
/// it.</summary>
public abstract class Instrument
{
    /// <summary>Makes an instrument.</summary>
    /// <param name="bench">The bench that it is part of.</param>
    /// <param name="role">What it is to the bench, e.g. <c>supply</c>.</param>
    protected Instrument(Bench bench, string role)
    {
        ArgumentNullException.ThrowIfNull(bench);
        ArgumentException.ThrowIfNullOrEmpty(role);
        (Bench, Role) = (bench, role);
        Scpi = new Interpreter(Identify, Reset);
    }

    /// <summary>What it is to the bench.</summary>
    public string Role { get; }

    /// <summary>The bench that it is part of.</summary>
    protected Bench Bench { get; }

    /// <summary>How often its firmware started anew: connections of before are ended.</summary>
    public int Boots { get; private set; }

    /// <summary>Its commands and status.</summary>
    protected Interpreter Scpi { get; }

    /// <summary>Obeys one message.</summary>
    /// <param name="message">The message without its terminator, a character a byte; null: one that was too
    /// long.</param>
    public Answer Obey(string? message)
    {
        if (message is not null && Bench.WorksAhead)
        {
            Foresee(message);
        }

        lock (Bench.Gate)
        {
            Bench.Advance();
            Refresh();
            if (message is null)
            {
                Scpi.Status.Report(-363, null);
                return new Answer([]);
            }

            if (Bench.Faults.Take(LinkFault.Of(Role, LinkFault.Reboot)))
            {
                Boots++;
                Reset();
                return new Answer([]) { CutShort = true };
            }

            Preload(LinkFault.QueueOverflow, ErrorList.Capacity + 1, -222);
            Preload(LinkFault.HardwareError, 1, -240);
            Reply reply = Scpi.Obey(message);
            Refresh();
            return Deliver(message, reply);
        }
    }

    /// <summary>The status byte, as a link reads it that can.</summary>
    /// <param name="replyWaits">Whether a reply was not read yet.</param>
    public int Poll(bool replyWaits)
    {
        lock (Bench.Gate)
        {
            Bench.Advance();
            Refresh();
            return Scpi.Status.StatusByte(replyWaits);
        }
    }

    /// <summary>Notes that a reply was dropped because a new message came before it was read.</summary>
    public void Interrupt()
    {
        lock (Bench.Gate)
        {
            Scpi.Status.Report(-410, null);
        }
    }

    /// <summary>Takes the conditions over into the status registers.</summary>
    protected virtual void Refresh()
    {
    }

    /// <summary>Computes what the message will want while <see cref="Bench.Gate"/> is free: one instrument's arithmetic must
    /// not keep the others from answering.</summary>
    protected virtual void Foresee(string message)
    {
    }

    /// <summary>Goes back to the settings after power-on (<c>*RST</c>).</summary>
    protected abstract void Reset();

    /// <summary>How the reply goes out.</summary>
    protected virtual Answer Deliver(string message, Reply reply)
    {
        ArgumentNullException.ThrowIfNull(reply);
        return LinkFault.Spoil(Role, message, reply.Finish(), reply.Blocks, Bench.Faults);
    }

    /// <summary>Model in the answer to <c>*IDN?</c>.</summary>
    protected virtual string Model => $"FAKEBENCH-{Role.ToUpperInvariant()}";

    private void Preload(string fault, int entries, int number)
    {
        if (Bench.Faults.Take(LinkFault.Of(Role, fault)))
        {
            for (int i = 0; i < entries; i++)
            {
                Scpi.Status.Report(number, "left by somebody else");
            }
        }
    }

    private string Identify() => $"BENCHRUNNER,{Model},0,1";
}
