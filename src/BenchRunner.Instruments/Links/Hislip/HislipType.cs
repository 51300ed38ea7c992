namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>Message types of HiSLIP (IVI-6.1 revision 2.0, table of message types).</summary>
/// <remarks>Those from <see cref="GetDescriptors"/> on are of protocol version 2.0, which this program does not speak:
/// they are known by name only.</remarks>
public enum HislipType : byte
{
    /// <summary>Synchronous channel, from the client: opens a session.</summary>
    Initialize = 0,

    /// <summary>Answer to <see cref="Initialize"/>.</summary>
    InitializeResponse = 1,

    /// <summary>Both channels, both ways: the connection is over.</summary>
    FatalError = 2,

    /// <summary>Both channels, both ways: one message was not obeyed.</summary>
    Error = 3,

    /// <summary>Asynchronous channel, from the client: asks for a lock or gives it back.</summary>
    AsyncLock = 4,

    /// <summary>Answer to <see cref="AsyncLock"/>.</summary>
    AsyncLockResponse = 5,

    /// <summary>Synchronous channel, both ways: a part of a message that is not its last.</summary>
    Data = 6,

    /// <summary>Synchronous channel, both ways: the last or only part of a message.</summary>
    DataEnd = 7,

    /// <summary>Synchronous channel, from the client: second step of a device clear.</summary>
    DeviceClearComplete = 8,

    /// <summary>Answer to <see cref="DeviceClearComplete"/>.</summary>
    DeviceClearAcknowledge = 9,

    /// <summary>Asynchronous channel, from the client: remote and local control.</summary>
    AsyncRemoteLocalControl = 10,

    /// <summary>Answer to <see cref="AsyncRemoteLocalControl"/>.</summary>
    AsyncRemoteLocalResponse = 11,

    /// <summary>Synchronous channel, from the client: a trigger.</summary>
    Trigger = 12,

    /// <summary>Synchronous channel, from the server: the reply that was not read is void.</summary>
    Interrupted = 13,

    /// <summary>Asynchronous channel, from the server: the same.</summary>
    AsyncInterrupted = 14,

    /// <summary>Asynchronous channel, from the client: the longest message that it takes.</summary>
    AsyncMaximumMessageSize = 15,

    /// <summary>Answer to <see cref="AsyncMaximumMessageSize"/>: the longest that the server takes.</summary>
    AsyncMaximumMessageSizeResponse = 16,

    /// <summary>Asynchronous channel, from the client: joins it to a session.</summary>
    AsyncInitialize = 17,

    /// <summary>Answer to <see cref="AsyncInitialize"/>.</summary>
    AsyncInitializeResponse = 18,

    /// <summary>Asynchronous channel, from the client: first step of a device clear.</summary>
    AsyncDeviceClear = 19,

    /// <summary>Asynchronous channel, from the server: it wants service.</summary>
    AsyncServiceRequest = 20,

    /// <summary>Asynchronous channel, from the client: asks for the status byte.</summary>
    AsyncStatusQuery = 21,

    /// <summary>Answer to <see cref="AsyncStatusQuery"/>.</summary>
    AsyncStatusResponse = 22,

    /// <summary>Answer to <see cref="AsyncDeviceClear"/>.</summary>
    AsyncDeviceClearAcknowledge = 23,

    /// <summary>Asynchronous channel, from the client: asks who holds locks.</summary>
    AsyncLockInfo = 24,

    /// <summary>Answer to <see cref="AsyncLockInfo"/>.</summary>
    AsyncLockInfoResponse = 25,

    /// <summary>Asks for descriptors.</summary>
    GetDescriptors = 26,

    /// <summary>Answer to <see cref="GetDescriptors"/>.</summary>
    GetDescriptorsResponse = 27,

    /// <summary>Begins encryption of the synchronous channel.</summary>
    StartTLS = 28,

    /// <summary>Begins encryption of the asynchronous channel.</summary>
    AsyncStartTLS = 29,

    /// <summary>Answer to <see cref="AsyncStartTLS"/>.</summary>
    AsyncStartTLSResponse = 30,

    /// <summary>Ends encryption of the synchronous channel.</summary>
    EndTLS = 31,

    /// <summary>Ends encryption of the asynchronous channel.</summary>
    AsyncEndTLS = 32,

    /// <summary>Answer to <see cref="AsyncEndTLS"/>.</summary>
    AsyncEndTLSResponse = 33,

    /// <summary>Asks for the ways to authenticate.</summary>
    GetSaslMechanismList = 34,

    /// <summary>Answer to <see cref="GetSaslMechanismList"/>.</summary>
    GetSaslMechanismListResponse = 35,

    /// <summary>Begins to authenticate.</summary>
    AuthenticationStart = 36,

    /// <summary>Goes on authenticating.</summary>
    AuthenticationExchange = 37,

    /// <summary>Ends authenticating.</summary>
    AuthenticationResult = 38,
}
