namespace FakeBench.Hosting.Hislip;

/// <summary>Kinds of HiSLIP message that the server knows (IVI-6.1, protocol version 1.0), by their number on the
/// wire.</summary>
public static class Kind
{
    public const byte Initialize = 0;
    public const byte InitializeResponse = 1;
    public const byte FatalError = 2;
    public const byte Error = 3;
    public const byte AsyncLock = 4;
    public const byte AsyncLockResponse = 5;
    public const byte Data = 6;
    public const byte DataEnd = 7;
    public const byte DeviceClearComplete = 8;
    public const byte DeviceClearAcknowledge = 9;
    public const byte AsyncRemoteLocalControl = 10;
    public const byte AsyncRemoteLocalResponse = 11;
    public const byte Trigger = 12;
    public const byte Interrupted = 13;
    public const byte AsyncInterrupted = 14;
    public const byte AsyncMaximumMessageSize = 15;
    public const byte AsyncMaximumMessageSizeResponse = 16;
    public const byte AsyncInitialize = 17;
    public const byte AsyncInitializeResponse = 18;
    public const byte AsyncDeviceClear = 19;
    public const byte AsyncServiceRequest = 20;
    public const byte AsyncStatusQuery = 21;
    public const byte AsyncStatusResponse = 22;
    public const byte AsyncDeviceClearAcknowledge = 23;
    public const byte AsyncLockInfo = 24;
    public const byte AsyncLockInfoResponse = 25;

    /// <summary>From here on a kind is a vendor's own.</summary>
    public const byte FirstOfVendors = 128;
}
