namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>Which of a server's messages a client takes, by the state it is in (IVI-6.1, 2.5, 3.1.2, 6.1, 6.12).</summary>
public static class HislipRules
{
    /// <summary>Judges a message on the synchronous channel of a session in synchronised mode.</summary>
    /// <param name="header">Its header.</param>
    /// <param name="lastSent">Identifier of the client's last message.</param>
    /// <param name="clearing">Whether a device clear is under way.</param>
    /// <returns>What is wrong with it; null: it is taken.</returns>
    public static HislipFault? Judge(HislipHeader header, uint lastSent, bool clearing)
    {
        var isEnd = header.Type is HislipType.FatalError or HislipType.DeviceClearAcknowledge;
        return clearing && !isEnd ? HislipFault.Discarded : header.Unknown ?? header.Type switch
        {
            HislipType.Data when header.Parameter == HislipIds.Unmarked => null,
            HislipType.Data or HislipType.DataEnd =>
                header.Parameter == lastSent && lastSent != HislipIds.None ? null : HislipFault.StaleMessage,
            HislipType.DeviceClearAcknowledge => clearing ? null : HislipFault.OutOfSequence,
            HislipType.Interrupted or HislipType.Error or HislipType.FatalError => null,
            _ => IsOfAsynchronous(header.Type) ? HislipFault.WrongChannel : HislipFault.OutOfSequence,
        };
    }

    /// <summary>Judges a message on the asynchronous channel.</summary>
    /// <param name="header">Its header.</param>
    /// <param name="due">The answer that is waited for; null: none.</param>
    /// <returns>What is wrong with it; null: it is taken.</returns>
    public static HislipFault? JudgeAsynchronous(HislipHeader header, HislipType? due) =>
        header.Unknown ?? header.Type switch
        {
            HislipType.AsyncInterrupted or HislipType.AsyncServiceRequest => null,
            HislipType.Error or HislipType.FatalError => null,
            var type when type == due => null,
            var type => IsOfAsynchronous(type) ? HislipFault.OutOfSequence : HislipFault.WrongChannel,
        };

    private static bool IsOfAsynchronous(HislipType type) => type
        is HislipType.AsyncLock or HislipType.AsyncLockResponse or HislipType.AsyncRemoteLocalControl
        or HislipType.AsyncRemoteLocalResponse or HislipType.AsyncInterrupted or HislipType.AsyncMaximumMessageSize
        or HislipType.AsyncMaximumMessageSizeResponse or HislipType.AsyncInitialize
        or HislipType.AsyncInitializeResponse or HislipType.AsyncDeviceClear or HislipType.AsyncServiceRequest
        or HislipType.AsyncStatusQuery or HislipType.AsyncStatusResponse or HislipType.AsyncDeviceClearAcknowledge
        or HislipType.AsyncLockInfo or HislipType.AsyncLockInfoResponse or HislipType.AsyncStartTLS
        or HislipType.AsyncStartTLSResponse or HislipType.AsyncEndTLS or HislipType.AsyncEndTLSResponse;
}
