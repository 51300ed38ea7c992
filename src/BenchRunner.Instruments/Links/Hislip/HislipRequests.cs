namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>The asynchronous channel of a session: one request at a time, each with its answer (IVI-6.1, 6.5, 6.9, 6.12,
/// 6.14).</summary>
/// <param name="name">The link as the bench file names it.</param>
/// <param name="channel">The channel.</param>
/// <param name="dropped">Told what was not taken.</param>
internal sealed class HislipRequests(string name, HislipChannel channel, Action<string> dropped)
{
    /// <summary>How many messages that nothing asked for are dropped while one is waited for.</summary>
    public const int MostDropped = 64;

    // Interrupted is said on both channels, in no order to rely on.
    private int _interruptions;

    /// <summary>Sends a request and reads the header of its answer, whose payload may follow.</summary>
    /// <param name="request">The request; its length is the payload's.</param>
    /// <param name="payload">Its payload.</param>
    /// <param name="due">The type of the answer.</param>
    /// <param name="cancel">Ends it; its answer is dropped when it comes.</param>
    /// <exception cref="LinkException">Lost, or an error instead of the answer.</exception>
    public ValueTask<HislipHeader> Ask(
        HislipHeader request, ReadOnlyMemory<byte> payload, HislipType due, CancellationToken cancel)
    {
        channel.Send(request, payload.Span);
        return Take(due, cancel);
    }

    /// <summary>Waits for the half of an interruption that comes on this channel.</summary>
    /// <exception cref="LinkException">Lost.</exception>
    public async ValueTask Interruption(CancellationToken cancel)
    {
        if (_interruptions == 0)
        {
            await Take(HislipType.AsyncInterrupted, cancel);
        }

        _interruptions--;
    }

    /// <summary>Forgets interruptions: the device was cleared.</summary>
    public void Restart() => _interruptions = 0;

    private async ValueTask<HislipHeader> Take(HislipType due, CancellationToken cancel)
    {
        for (var n = 0; n < MostDropped; n++)
        {
            var header = await channel.Next(cancel);
            switch (HislipRules.JudgeAsynchronous(header, due))
            {
                case HislipFault.WrongChannel:
                    throw channel.Refused(new HislipException(HislipFault.WrongChannel, $"{header.Type}"));
                case { } fault:
                    // E.g. the answer to a request that was given up.
                    dropped($"{fault}: {header.Type} on the asynchronous channel");
                    continue;
            }

            _interruptions += header.Type == HislipType.AsyncInterrupted ? 1 : 0;
            if (header.Type == due)
            {
                return header;
            }

            if (header.Type is HislipType.Error or HislipType.FatalError)
            {
                throw new LinkException(name, $"the instrument says {await channel.Text(header, cancel)}");
            }

            if (header.Type == HislipType.AsyncServiceRequest)
            {
                dropped($"a service request, status {header.Control}");
            }
        }

        throw new LinkException(name, $"more than {MostDropped} messages that nothing had asked for");
    }
}
